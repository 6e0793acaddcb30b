package countwright.model;

import static countwright.design.Terms.interaction;
import static countwright.design.Terms.levels;
import static countwright.design.Terms.linear;
import static countwright.reference.Digits.assertDigits;
import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import countwright.fit.Convergence;
import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.util.Random;
import org.junit.jupiter.api.Test;

/** Fits that do not go as wished: nothing is hidden, and what can be estimated is. */
class FittedModelNoticesTest {

    private static final Table TABLE = Table.of(
            NumberColumn.of("y", 3, 4, 0, 0, 5, 2, 6, 1),
            NumberColumn.of("x", 1, 2, 3, 1, 2, 5, 4, 3),
            NumberColumn.of("twiceX", 2, 4, 6, 2, 4, 10, 8, 6),
            TextColumn.of("g", "a", "a", "b", "b", "c", "c", "a", "c"));

    @Test
    void fit_levelWithoutEvents_isNamedAndTheRestEstimated() {
        FittedModel model = CountModel.of("y").on(levels("g"), linear("x")).fit(TABLE);
        FittedModel without = CountModel.of("y")
                .on(levels("g"), linear("x"))
                .fit(TABLE.where(row -> !row.text("g").equals("b")));

        assertThat(model.convergence()).isInstanceOf(Convergence.Converged.class);
        assertThat(model.notices())
                .anySatisfy(notice -> assertThat(notice)
                        .contains("No finite estimate")
                        .contains("g b vs a")
                        .contains("merge the level"));
        assertThat(model.coefficients()).hasSize(3);
        assertDigits(
                without.coefficient("x (per 1)").estimate(),
                model.coefficient("x (per 1)").estimate(),
                12);
        assertDigits(without.logLikelihood(), model.logLikelihood(), 12);
        assertThat(model.residualDegreesOfFreedom()).isEqualTo(without.residualDegreesOfFreedom());
        assertThat(model.fittedMeans()[2]).isZero();
        assertThat(model.residuals(Residual.STANDARDISED_DEVIANCE)[2]).isZero();
        assertThat(model.toString()).contains("no events");
    }

    @Test
    void predict_levelWithoutEvents_isZeroWithNoUpperLimit() {
        FittedModel model = CountModel.of("y").on(levels("g")).fit(TABLE);
        Predictions predictions = model.predict(TABLE);
        assertThat(predictions.row(2).rate()).isZero();
        assertThat(predictions.row(2).rateUpper()).isInfinite();
        assertThat(predictions.notes()).anySatisfy(note -> assertThat(note).contains("no upper limit"));
    }

    @Test
    void fit_columnDeterminedByAnother_dropsAndNamesTheLast() {
        FittedModel model = CountModel.of("y").on(linear("x"), linear("twiceX")).fit(TABLE);
        assertThat(model.coefficients()).extracting(Coefficient::name).containsExactly("baseline", "x (per 1)");
        assertThat(model.notices())
                .anySatisfy(notice -> assertThat(notice).contains("Left out").contains("twiceX (per 1)"));
    }

    @Test
    void fit_referenceWithoutEvents_isRefusedWithARemedy() {
        assertThatThrownBy(
                        () -> CountModel.of("y").on(levels("g").reference("b")).fit(TABLE))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("reference level 'b'")
                .hasMessageContaining("levels(\"g\").reference(\"a\")");
    }

    @Test
    void fit_noFiniteMaximum_isPartOfTheResult() {
        Table separated = Table.of(
                NumberColumn.of("y", 0, 0, 0, 1, 2, 5, 9),
                NumberColumn.of("x", 1, 2, 3, 4, 5, 6, 7),
                TextColumn.of("g", "a", "a", "a", "b", "b", "b", "b"));
        FittedModel model = CountModel.of("y")
                .on(linear("x"), interaction(linear("x"), levels("g")))
                .fit(separated);
        assertThat(model.convergence())
                .isInstanceOfSatisfying(
                        Convergence.NoFiniteMaximum.class,
                        none -> assertThat(none.columns()).containsExactly(1, 2));
        assertThat(model.notices().get(0))
                .startsWith("There is no finite maximum")
                .contains("x (per 1)");
        assertThat(model.toString()).contains("not finite");
    }

    @Test
    void fit_missingValues_leavesRowsOutAndSaysSo() {
        Table gaps = TABLE.with(NumberColumn.of("x", 1, Double.NaN, 3, 1, 2, 5, Double.NaN, 3));
        FittedModel model = CountModel.of("y").on(linear("x")).fit(gaps);
        assertThat(model.rowCount()).isEqualTo(6);
        assertThat(model.fittedMeans()).hasSize(6);
        assertThat(model.notices()).contains("2 of 8 rows were left out because values are missing: x (2).");
    }

    @Test
    void fit_asManyCoefficientsAsRows_hasNoDispersion() {
        FittedModel model = CountModel.of("y").on(levels("g")).fit(TABLE.rows(0, 4));
        assertThat(model.residualDegreesOfFreedom()).isZero();
        assertThatThrownBy(model::dispersion).isInstanceOf(IllegalStateException.class);
        assertThat(model.notices()).anySatisfy(notice -> assertThat(notice).contains("nothing is left to judge"));
        assertThat(model.toString()).contains("rate ratio");
    }

    @Test
    void notices_overdispersedCounts_sayWhatItMeans() {
        Table wild = Table.of(NumberColumn.of("y", 0, 30, 1, 22, 0, 0, 41, 3, 0, 17, 0, 2));
        assertThat(CountModel.of("y").fit(wild).notices())
                .singleElement()
                .asString()
                .startsWith("Dispersion ")
                .contains("vary more than a Poisson model allows")
                .contains("too narrow");
    }

    @Test
    void notices_evenCounts_sayWhatItMeans() {
        Table even = Table.of(NumberColumn.of("y", 9, 10, 11, 10, 10, 9, 11, 10, 10, 10, 10, 10));
        assertThat(CountModel.of("y").fit(even).notices())
                .singleElement()
                .asString()
                .contains("vary less than a Poisson model expects");
    }

    /**
     * Poisson counts with means from 0.002 to 0.4, known up to a constant: a notice would be a false alarm. The chance of one
     * is near 5% by design (the sum is skewed, so a little more above than below); of 300 tables 30 or more would have one
     * with a chance below 0.001 at 5.5%. Judged by the spread sqrt(2 df), which holds for large counts only, three in four have one.
     */
    @Test
    void notices_sparseCountsOfUnequalExposure_areSeldomFalseAlarms() {
        Random random = new Random(20260);
        int alarms = 0;
        for (int table = 0; table < 300; table++) {
            double[] counts = new double[600];
            double[] exposures = new double[600];
            for (int row = 0; row < 600; row++) {
                exposures[row] = 0.002 * Math.pow(200, random.nextDouble());
                double time = -Math.log(1 - random.nextDouble());
                while (time < exposures[row]) {
                    counts[row]++;
                    time -= Math.log(1 - random.nextDouble());
                }
            }
            Table sparse = Table.of(NumberColumn.of("y", counts), NumberColumn.of("t", exposures));
            alarms += CountModel.of("y").exposure("t").fit(sparse).notices().size();
        }
        assertThat(alarms).isLessThan(30);
    }

    @Test
    void pearsonSpread_equalMeans_isThatOfTheChiSquareDistribution() {
        FittedModel model = CountModel.of("y").fit(TABLE);
        assertDigits(
                Math.sqrt(2 * model.residualDegreesOfFreedom()),
                model.fit().estimate().summary().pearsonSpread(),
                12);
    }

    @Test
    void display_covariateInALargeUnit_isStillDetermined() {
        Table small = TABLE.with("millionths", row -> row.number("x") / 1e6);
        FittedModel model = CountModel.of("y").on(linear("millionths")).fit(small);
        assertThat(model.coefficients().get(1).standardError()).isGreaterThan(20);
        assertThat(model.toString()).doesNotContain("not determined");
    }

    @Test
    void display_termsAllButTheSame_areNotDeterminedAndNamed() {
        Table near = TABLE.with("almostX", row -> row.number("x") + (row.number("y") == 3 ? 1e-6 : 0));
        FittedModel model =
                CountModel.of("y").on(linear("x"), linear("almostX")).fit(near);
        assertThat(model.toString()).contains("not determined");
        assertThat(model.notices())
                .anySatisfy(notice -> assertThat(notice)
                        .startsWith("Not determined, because the rows can hardly tell them")
                        .contains("x (per 1); almostX (per 1)")
                        .contains("Drop one"));
    }

    @Test
    void fit_meansThatUnderflowOnTheWay_haveNoMissingMeasure() {
        Table far = Table.of(NumberColumn.of("y", 0, 0, 3, 4), NumberColumn.of("x", 1, 2, 1000, 1000));
        FittedModel model = CountModel.of("y").on(linear("x")).fit(far);
        assertThat(model.convergence()).isInstanceOf(Convergence.NoFiniteMaximum.class);
        assertThat(model.pearsonChiSquare()).isNotNaN();
        assertThat(model.fit().estimate().summary().pearsonSpread()).isFinite();
        assertThat(model.toString()).doesNotContain("NaN").doesNotContain("∞");
    }

    @Test
    void notices_severalLevelsWithoutEvents_speakOfThemInThePlural() {
        Table two = TABLE.with(TextColumn.of("h", "a", "a", "b", "c", "a", "a", "a", "a"));
        assertThat(CountModel.of("y").on(levels("h")).fit(two).notices())
                .anySatisfy(notice -> assertThat(notice).contains("in their rows: h b vs a; h c vs a. Their rates"));
    }
}
