package countwright.model;

import static countwright.design.Terms.interaction;
import static countwright.design.Terms.levels;
import static countwright.design.Terms.linear;
import static countwright.reference.Digits.assertDigits;
import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import countwright.fit.Convergence;
import countwright.reference.PublishedData;
import countwright.table.NumberColumn;
import countwright.table.Row;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Collections;
import java.util.List;
import java.util.Random;
import java.util.function.ToDoubleFunction;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;

/** Truths about a Poisson model with log link that need no table of values. */
class FittedModelPropertyTest {

    private static final CountModel MODEL = CountModel.of("faults")
            .exposure("km")
            .on(linear("age"), levels("depot"), levels("door"), interaction(linear("age"), levels("door")));

    private final Table rides = InventedRides.table(400, 11);
    private final FittedModel fitted = MODEL.fit(rides);

    @Test
    void fittedMeans_withBaseline_sumToTheCounts() {
        assertDigits(fitted.totalCount(), Arrays.stream(fitted.fittedMeans()).sum(), 13);
    }

    @Test
    void score_atTheEstimate_isZero() {
        double[] means = fitted.fittedMeans();
        double[] counts = fitted.counts();
        double[] age = rides.numbers("age").toArray();
        double score = IntStream.range(0, means.length)
                .mapToDouble(i -> age[i] * (counts[i] - means[i]))
                .sum();
        double size = IntStream.range(0, means.length)
                .mapToDouble(i -> age[i] * counts[i])
                .sum();
        assertThat(score / size).isCloseTo(0, within(1e-13));
    }

    @Test
    void leverage_sumsToTheNumberOfCoefficients() {
        double[] leverage = fitted.leverage();
        assertDigits(fitted.coefficients().size(), Arrays.stream(leverage).sum(), 12);
        assertThat(Arrays.stream(leverage).boxed())
                .allSatisfy(h -> assertThat(h).isBetween(0.0, 1.0));
    }

    @Test
    void residuals_squared_sumToDevianceAndPearson() {
        assertDigits(fitted.deviance(), sumOfSquares(fitted.residuals(Residual.DEVIANCE)), 12);
        assertDigits(fitted.pearsonChiSquare(), sumOfSquares(fitted.residuals(Residual.PEARSON)), 12);
    }

    @Test
    void fit_exposureInOtherUnits_movesTheBaselineOnly() {
        FittedModel inMetres = MODEL.fit(with(rides, "km", row -> row.number("km") * 1000));
        assertDigits(
                fitted.baselineRate().rate() / 1000, inMetres.baselineRate().rate(), 12);
        assertSameExceptBaseline(fitted, inMetres, 11);
        assertDigits(fitted.logLikelihood(), inMetres.logLikelihood(), 13);
    }

    @Test
    void fit_logOfExposureAsOffset_isTheSame() {
        Table withLog = with(rides, "logKm", row -> Math.log(row.number("km")));
        FittedModel byOffset = CountModel.of("faults")
                .offset("logKm")
                .on(MODEL.terms().toArray(new countwright.design.Term[0]))
                .fit(withLog);
        assertThat(byOffset.coefficients()).isEqualTo(fitted.coefficients());
    }

    @Test
    void fit_rowsInAnotherOrder_agrees() {
        List<Integer> order =
                new ArrayList<>(IntStream.range(0, rides.rowCount()).boxed().toList());
        Collections.shuffle(order, new Random(5));
        FittedModel shuffled =
                MODEL.fit(rides.rows(order.stream().mapToInt(i -> i).toArray()));
        assertSameExceptBaseline(fitted, shuffled, 12);
        assertDigits(fitted.logLikelihood(), shuffled.logLikelihood(), 14);
    }

    @Test
    void fit_sameTableTwice_givesTheSameBits() {
        assertThat(MODEL.fit(rides).coefficients()).isEqualTo(fitted.coefficients());
    }

    @Test
    void fit_anotherReferenceLevel_leavesTheMeansAlone() {
        FittedModel other = CountModel.of("faults")
                .exposure("km")
                .on(
                        linear("age"),
                        levels("depot").reference("Quayside"),
                        levels("door").reference("Sliding"),
                        interaction(linear("age"), levels("door")))
                .fit(rides);
        assertThat(other.coefficients().stream().map(Coefficient::name))
                .containsExactly(
                        "baseline",
                        "age (per 1)",
                        "depot Harbour vs Quayside",
                        "depot Mill vs Quayside",
                        "door Folding vs Sliding",
                        "age (per 1) × door Folding vs Sliding");
        double[] means = other.fittedMeans();
        double[] expected = fitted.fittedMeans();
        for (int row = 0; row < means.length; row++) {
            assertDigits(expected[row], means[row], 12);
        }
        assertDigits(fitted.deviance(), other.deviance(), 13);
    }

    @Test
    void fit_columnInOtherUnits_dividesItsCoefficient() {
        FittedModel inMonths = MODEL.fit(with(rides, "age", row -> row.number("age") * 12));
        assertDigits(
                fitted.coefficient("age (per 1)").estimate() / 12,
                inMonths.coefficient("age (per 1)").estimate(),
                11);
        assertDigits(
                fitted.coefficient("age (per 1)").standardError() / 12,
                inMonths.coefficient("age (per 1)").standardError(),
                12);
    }

    @Test
    void fit_everyRowManyTimes_keepsEstimatesAndShrinksErrors() {
        int copies = 400;
        int[] rows = IntStream.range(0, copies * rides.rowCount())
                .map(i -> i % rides.rowCount())
                .toArray();
        FittedModel many = MODEL.fit(rides.rows(rows));
        for (Coefficient c : fitted.coefficients()) {
            assertDigits(c.name(), c.estimate(), many.coefficient(c.name()).estimate(), 11);
            assertDigits(
                    c.name(), c.standardError() / 20, many.coefficient(c.name()).standardError(), 12);
        }
        assertDigits(copies * fitted.logLikelihood(), many.logLikelihood(), 13);
    }

    @Test
    void fit_countsOfABillion_matchTheClosedForm() {
        FittedModel model = CountModel.of("y").exposure("e").on(levels("g")).fit(twoGroups(1e9, 1, 1.0e9 + 12_345, 2));
        assertThat(model.convergence()).isInstanceOf(Convergence.Converged.class);
        assertDigits(
                Math.log((1.0e9 + 12_345) / 2e9), model.coefficient("g b vs a").estimate(), 14);
        assertDigits(
                Math.sqrt(1 / 1e9 + 1 / (1.0e9 + 12_345)),
                model.coefficient("g b vs a").standardError(),
                14);
    }

    @Test
    void fit_exposuresOverTwelveOrders_matchTheClosedForm() {
        FittedModel model = CountModel.of("y").exposure("e").on(levels("g")).fit(twoGroups(3, 1e-6, 7, 1e6));
        assertDigits(Math.log(3e6), model.coefficient("baseline").estimate(), 14);
        assertDigits(
                Math.log((7 / 1e6) / (3 / 1e-6)), model.coefficient("g b vs a").estimate(), 14);
        assertDigits(Math.sqrt(1 / 3.0 + 1 / 7.0), model.coefficient("g b vs a").standardError(), 14);
    }

    @Test
    void fit_uncentredYears_keepTheDigitsOfCentredOnes() {
        FittedModel centred = PublishedData.fit("horsekicks_trend_cluster");
        FittedModel raw = CountModel.of("deaths")
                .on(linear("year"), interaction(linear("year"), linear("year")))
                .fit(PublishedData.table("horsekicks"));
        assertThat(raw.convergence()).isInstanceOf(Convergence.Converged.class);
        assertThat(raw.coefficients()).hasSize(3);
        Coefficient square = raw.coefficients().get(2);
        assertDigits(centred.coefficients().get(2).estimate() / 100, square.estimate(), 10);
        assertDigits(centred.coefficients().get(2).standardError() / 100, square.standardError(), 10);
        double[] leverage = raw.leverage();
        double[] expected = centred.leverage();
        for (int row = 0; row < leverage.length; row++) {
            assertDigits(expected[row], leverage[row], 10);
        }
    }

    @Test
    void at_wholeLevels_widensTheIntervals() {
        RateRatio usual = fitted.rateRatios().get(0);
        RateRatio wider = fitted.at(0.99).rateRatios().get(0);
        assertThat(wider.ratio()).isEqualTo(usual.ratio());
        assertThat(wider.lower()).isLessThan(usual.lower());
        Coefficient age = fitted.coefficient("age (per 1)");
        assertDigits(Math.exp(age.estimate() + 1.959963984540054 * age.standardError()), usual.upper(), 13);
    }

    private static void assertSameExceptBaseline(FittedModel expected, FittedModel actual, double digits) {
        for (int i = 1; i < expected.coefficients().size(); i++) {
            Coefficient e = expected.coefficients().get(i);
            Coefficient a = actual.coefficients().get(i);
            assertDigits(e.name(), e.estimate(), a.estimate(), digits);
            assertDigits(e.name(), e.standardError(), a.standardError(), digits);
        }
    }

    private static Table twoGroups(double countA, double exposureA, double countB, double exposureB) {
        return Table.of(
                NumberColumn.of("y", countA, countB),
                NumberColumn.of("e", exposureA, exposureB),
                TextColumn.of("g", "a", "b"));
    }

    private static double sumOfSquares(double[] values) {
        return Arrays.stream(values).map(v -> v * v).sum();
    }

    private static Table with(Table table, String name, ToDoubleFunction<Row> value) {
        double[] values = IntStream.range(0, table.rowCount())
                .mapToDouble(row -> value.applyAsDouble(new Row(table, row)))
                .toArray();
        return table.with(NumberColumn.of(name, values));
    }
}
