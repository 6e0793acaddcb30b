package countwright.chart;

import static countwright.design.Terms.levels;
import static countwright.design.Terms.linear;
import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import countwright.model.CountModel;
import countwright.model.FittedModel;
import countwright.show.Numbers;
import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.util.List;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;

class ChartsTest {

    private static final Table FAULTS = SyntheticFit.faults(200, SyntheticFit.depots(4), 0, 21);

    private static FittedModel model() {
        return CountModel.of("faults")
                .exposure("vehicleKm")
                .on(linear("age"), levels("depot").reference("Harbour"))
                .fit(FAULTS);
    }

    @Nested
    class Fitted {

        @Test
        void fitted_realModel_givesItsPredictionsInWords() {
            FittedModel model = model();
            double low = java.util.Arrays.stream(FAULTS.numbers("age").toArray())
                    .min()
                    .orElseThrow();
            Table scenario = Table.of(NumberColumn.of("age", low), TextColumn.of("depot", "Harbour"));
            double rate = model.predict(scenario).rows().get(0).rate();

            Chart chart = Charts.fitted(model, "age");

            assertThat(chart.alternative())
                    .contains("faults per 1,000 vehicleKm")
                    .contains("from " + Numbers.significant(1000 * rate, 3) + " at age "
                            + NumberColumn.of("", low).text(0))
                    .contains("depot = Harbour (most rows)");
        }

        @Test
        void fitted_levels_namesHighestAndLowest() {
            Chart chart = Charts.fitted(model(), "depot");

            assertThat(chart.toString()).contains("Quayside", "North Yard", "age = ", "(median)");
        }

        @Test
        void fitted_onlyCovariate_showsPlainObservedRates() {
            FittedModel model = CountModel.of("faults")
                    .exposure("vehicleKm")
                    .on(linear("age"))
                    .fit(FAULTS);

            Figure figure = Charts.fitted(model, "age").figure();

            assertThat(figure.layers()).extracting(Layer::name).contains("observed mean rate");
            assertThat(figure.caption()).doesNotContain("held at");
        }

        @Test
        void fitted_valuesOfManyDigits_areWrittenShort() {
            Table thirds = FAULTS.with("age", row -> row.number("age") / 3);
            FittedModel model = CountModel.of("faults")
                    .exposure("vehicleKm")
                    .on(linear("age"), levels("depot"))
                    .fit(thirds);

            assertThat(Charts.fitted(model, "age").display().plainText()).doesNotContainPattern("[0-9]\\.[0-9]{6}");
            assertThat(Charts.fitted(model, "depot").display().plainText()).doesNotContainPattern("[0-9]\\.[0-9]{6}");
        }

        @Test
        void fitted_years_areWrittenWithoutCommas() {
            Table table = Table.of(
                    NumberColumn.of("year", 2001, 2004, 2007, 2010), NumberColumn.of("faults", 12, 15, 11, 19));
            FittedModel model = CountModel.of("faults").on(linear("year")).fit(table);

            Chart chart = Charts.fitted(model, "year");

            assertThat(chart.alternative()).contains("at year 2001 to");
            assertThat(chart.figure().x().ticks()).extracting(Axis.Tick::label).contains("2002", "2010");
        }

        @Test
        void fitted_withoutExposure_speaksOfMeanCounts() {
            FittedModel model = CountModel.of("faults").on(linear("age")).fit(FAULTS);

            assertThat(Charts.fitted(model, "age").title()).isEqualTo("Fitted mean count over age");
            assertThat(Charts.fitted(model, "age").figure().y().title()).isEqualTo("mean faults");
        }

        @Test
        void fitted_misspeltCovariate_asksWhetherTheNearOneWasMeant() {
            FittedModel model = model();

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Charts.fitted(model, "aeg"))
                    .withMessage(
                            "the model has no covariate 'aeg'. Did you mean 'age'? Its covariates are age, depot.");
        }

        @Test
        void fitted_columnInNoTerm_saysSo() {
            FittedModel model = model();

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Charts.fitted(model, "vehicleKm"))
                    .withMessageEndingWith("'vehicleKm' is a column of the table, but in no term of the model.");
        }
    }

    @Nested
    class Rates {

        @Test
        void rates_twoGroups_givesExactIntervals() {
            Table table = Table.of(
                    TextColumn.of("site", "a", "a", "b"),
                    NumberColumn.of("n", 3, 2, 0),
                    NumberColumn.of("t", 60, 40, 50));

            // Garwood's interval for 5 events is 1.6235 to 11.6683, for none 0 to 3.6889; here per 1,000.
            assertThat(Charts.rates(table, "n", "t", "site").toString())
                    .contains("50.0", "16.2 to 116.7")
                    .contains("to 73.8");
        }

        @Test
        void rates_missingValues_areLeftOutAndCounted() {
            Table table = Table.of(
                    TextColumn.of("site", "a", "a", null, "b"),
                    NumberColumn.of("n", 3, Double.NaN, 1, 2),
                    NumberColumn.of("t", 1, 1, 1, 1));

            assertThat(Charts.rates(table, "n", "t", "site").figure().caption())
                    .endsWith("2 rows with missing values are left out.");
        }

        @Test
        void rates_noRow_saysThereIsNothingToDraw() {
            Table table = FAULTS.where(row -> false);

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Charts.rates(table, "faults", "vehicleKm", "depot"))
                    .withMessageStartingWith("there is nothing to draw: of 0 rows")
                    .withMessageContaining("'faults', 'vehicleKm' and 'depot'");
        }

        @Test
        void rates_badCountOrExposure_namesRowAndValue() {
            Table table = Table.of(
                    TextColumn.of("site", "a", "b"), NumberColumn.of("n", 1, 2.5), NumberColumn.of("t", 1, -2));

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Charts.rates(table, "n", "t", "site"))
                    .withMessageContaining("row 2 of column 'n' is 2.5");
            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Charts.rates(table.with(NumberColumn.of("n", 1, 2)), "n", "t", "site"))
                    .withMessageContaining("row 2 of column 't' is -2");
        }

        @Test
        void rates_moreThanSixtyGroups_showsThoseWithMostExposureAndSaysSo() {
            Table table = SyntheticFit.faults(400, SyntheticFit.depots(80), 0, 22);

            Figure figure = Charts.rates(table, "faults", "vehicleKm", "depot").figure();

            assertThat(figure.rows()).hasSize(60);
            assertThat(figure.caption()).contains("60 of 80 groups with the largest exposure");
        }
    }

    @Nested
    class MeanVariance {

        @Test
        void spreads_equalExposure_isTheSampleVariance() {
            Table table = Table.of(TextColumn.of("g", "a", "a", "a"), NumberColumn.of("n", 2, 4, 9));
            List<Groups.Group> groups = Groups.byValue(table.column("g"));
            double[] counts = {2, 4, 9};
            double[] means = MeanVarianceChart.meansAtGroupRate(groups, counts, new double[] {7, 7, 7});

            var spread =
                    MeanVarianceChart.spreads(groups, counts, means, Double.NaN).get(0);

            assertThat(spread.mean()).isCloseTo(5, within(1e-14));
            assertThat(spread.variance()).isCloseTo(13, within(1e-13));
        }

        @Test
        void spreads_countsInProportionToExposure_haveNoVariance() {
            List<Groups.Group> groups = Groups.byValue(TextColumn.of("g", "a", "a"));
            double[] counts = {3, 12};
            double[] means = MeanVarianceChart.meansAtGroupRate(groups, counts, new double[] {1, 4});

            assertThat(MeanVarianceChart.spreads(groups, counts, means, Double.NaN)
                            .get(0)
                            .variance())
                    .isCloseTo(0, within(1e-15));
        }

        @Test
        void meanVariance_groupsOfOneRow_saysWhatIsNeeded() {
            Table table = Table.of(TextColumn.of("g", "a", "b"), NumberColumn.of("n", 2, 4));

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Charts.meanVariance(table, "n", "g"))
                    .withMessageContaining("no group of 'g'")
                    .withMessageContaining("2 groups");
        }

        @Test
        void meanVariance_unknownGroupOfModel_namesColumns() {
            FittedModel model = model();

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Charts.meanVariance(model, "depto"))
                    .withMessageContaining("depot");
        }

        @Test
        void meanVariance_realModel_countsGroups() {
            assertThat(Charts.meanVariance(model(), "depot").alternative()).contains("of 4 groups");
        }
    }

    @Nested
    class Others {

        @Test
        void residuals_realModel_countsRowsBeyondTwo() {
            FittedModel model = model();
            long beyond = java.util.Arrays.stream(model.residuals(countwright.model.Residual.DEVIANCE))
                    .filter(r -> Math.abs(r) > 2)
                    .count();

            assertThat(Charts.residuals(model).toString()).contains(beyond + " of 200 rows");
        }

        @Test
        void rateRatios_realModel_namesEachWithItsRatio() {
            FittedModel model = model();

            String text = Charts.rateRatios(model).toString();

            assertThat(model.rateRatios()).isNotEmpty().allSatisfy(ratio -> {
                assertThat(text).contains(ratio.name(), ratio.ratioText(), ratio.intervalText());
                assertThat(model.rateRatioTable().toString()).contains(ratio.ratioText(), ratio.intervalText());
            });
        }
    }

    @Test
    void fitted_noFiniteMaximum_saysNotToUseIt() {
        FittedModel model = CountModel.of("y")
                .on(linear("x"))
                .fit(Table.of(NumberColumn.of("y", 0, 0, 0, 4, 2, 5), NumberColumn.of("x", 1, 2, 3, 5, 5, 5)));
        assertThat(Charts.fitted(model, "x").display().plainText()).contains("do not use this");
        assertThat(Charts.residuals(model).display().plainText()).contains("do not use this");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> Charts.rateRatios(model))
                .withMessageContaining("notices()");
    }

    @Test
    void fitted_severalRowsAtAValue_areCalledAMean() {
        FittedModel model = CountModel.of("y")
                .on(linear("x"))
                .fit(Table.of(NumberColumn.of("y", 1, 2, 3, 4), NumberColumn.of("x", 0, 0, 1, 1)));
        assertThat(Charts.fitted(model, "x").figure().layers())
                .extracting(Layer::name)
                .contains("observed mean count");
    }
}
