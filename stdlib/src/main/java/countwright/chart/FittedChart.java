package countwright.chart;

import countwright.model.Prediction;
import countwright.show.Grid;
import countwright.show.Numbers;
import java.util.Arrays;
import java.util.List;
import java.util.stream.IntStream;

/**
 * What a model fits over one covariate taken as a number, beside what was observed.
 *
 * <p>With other covariates in the model, plain observed rates would lie off the curve wherever the rows differ from the
 * typical values it is drawn for, which looks like a bad fit and is none. Each point is therefore adjusted as a
 * standardised ratio is: the fitted rate at the typical values, times observed over fitted events of its rows. A point off
 * the curve then says that the model misses there.
 */
final class FittedChart {

    private static final int CURVE_POINTS = 121;
    private static final int MOST_SINGLE_ROWS = 60;
    private static final int BINS = 20;

    /** The curve with its interval at some values of the covariate. */
    private static final class Curve {

        private final double[] values;
        private final List<Prediction> rows;

        Curve(double[] values, List<Prediction> rows) {
            this.values = values;
            this.rows = rows;
        }

        double[] values() {
            return values;
        }

        List<Prediction> rows() {
            return rows;
        }

        double[] rates() {
            return rows.stream().mapToDouble(Prediction::rate).toArray();
        }

        double[] lower() {
            return rows.stream().mapToDouble(Prediction::rateLower).toArray();
        }

        double[] upper() {
            return rows.stream().mapToDouble(Prediction::rateUpper).toArray();
        }
    }

    private final Fit fit;
    private final String covariate;
    private final Scenarios scenarios;
    private final boolean adjusted;

    private FittedChart(Fit fit, String covariate) {
        this.fit = fit;
        this.covariate = covariate;
        this.scenarios = new Scenarios(fit, covariate);
        this.adjusted = fit.covariates().size() > 1 || fit.offset().isPresent();
    }

    static Chart of(Fit fit, String covariate) {
        fit.checkCovariate(covariate);
        if (fit.table().rowCount() == 0) {
            throw new IllegalArgumentException("there is nothing to draw: the model used no row.");
        }
        return fit.isNumberIn(covariate)
                ? new FittedChart(fit, covariate).chart()
                : FittedLevelsChart.of(fit, covariate, new Scenarios(fit, covariate));
    }

    private Chart chart() {
        double[] values = fit.table().numbers(covariate).toArray();
        double low = Arrays.stream(values).min().orElseThrow();
        double high = Arrays.stream(values).max().orElseThrow();
        Curve curve = at(grid(low, high));
        boolean single = values.length <= MOST_SINGLE_ROWS;
        List<Groups.Group> pools = Groups.byQuantile(values, single ? values.length : BINS);
        double[] x = centres(pools, values);
        double[] observed = observed(pools, x);

        RateText unit =
                RateText.forRates(fit.response(), fit.exposure(), Math.max(highest(curve.rates()), highest(observed)));
        double top = Math.max(highest(curve.upper()), highest(observed)) * unit.factor();
        Figure empty = Figure.titled(
                        (fit.exposure().isEmpty() ? "Fitted mean count over " : "Fitted rate over ") + covariate,
                        Axis.linear(covariate, low, high, 8).withYearsUngrouped(),
                        Axis.linearWithRoomAtZero(unit.label(), top, 6))
                .subtitle(capitalised(span(unit, curve)))
                .caption(caption(pools.size(), single));
        Figure figure = withCurve(empty, unit, curve)
                .layer(Layer.points(pointName(pools.size() == values.length), Ink.OBSERVED, x, unit.scaled(observed)));
        String summary = "Fitted " + unit.label() + ": " + span(unit, curve) + "." + scenarios.sentence();
        return Chart.of(figure, summary, numbers(unit).toString());
    }

    private Figure withCurve(Figure figure, RateText unit, Curve curve) {
        String interval = fit.levelText() + " interval of the mean";
        double[] rates = unit.scaled(curve.rates());
        double[] lower = unit.scaled(curve.lower());
        double[] upper = unit.scaled(curve.upper());
        if (curve.values().length == 1) {
            return figure.layer(Layer.barsUp(interval, Ink.FITTED, curve.values(), lower, upper))
                    .layer(Layer.points("fitted", Ink.FITTED, curve.values(), rates));
        }
        return figure.layer(Layer.band(interval, Ink.BAND, curve.values(), lower, upper))
                .layer(Layer.line("fitted", Ink.FITTED, curve.values(), rates));
    }

    private Curve at(double[] values) {
        return new Curve(values, fit.predict().apply(scenarios.at(values)));
    }

    /** Returns the mean of the covariate in each pool, weighted by exposure. */
    private double[] centres(List<Groups.Group> pools, double[] values) {
        double[] exposures = fit.exposures().get();
        return pools.stream()
                .mapToDouble(pool -> pool.rows()
                                .mapToDouble(row -> values[row] * exposures[row])
                                .sum()
                        / pool.sum(exposures))
                .toArray();
    }

    private double[] observed(List<Groups.Group> pools, double[] x) {
        double[] counts = fit.counts().get();
        double[] against = adjusted ? fit.means().get() : fit.exposures().get();
        double[] typical = at(x).rates();
        double[] observed = new double[x.length];
        for (int i = 0; i < x.length; i++) {
            double ratio = pools.get(i).sum(counts) / pools.get(i).sum(against);
            observed[i] = adjusted ? typical[i] * ratio : ratio;
        }
        return observed;
    }

    private String pointName(boolean oneRowEach) {
        String what = fit.exposure().isEmpty() ? "count" : "rate";
        return "observed " + (oneRowEach ? what : "mean " + what) + (adjusted ? ", adjusted" : "");
    }

    private String span(RateText unit, Curve curve) {
        int last = curve.values().length - 1;
        String start = unit.text(curve.rates()[0]) + " at " + covariate + " " + Scenarios.value(curve.values()[0]);
        return last == 0
                ? start
                : "from " + start + " to " + unit.text(curve.rates()[last]) + " at " + covariate + " "
                        + Scenarios.value(curve.values()[last]);
    }

    private String caption(int pools, boolean single) {
        int rows = fit.table().rowCount();
        String points;
        if (single) {
            points = pools == rows ? "One point for each row" : "One point for each value of " + covariate;
        } else {
            points = "Points: " + pools + " bins of " + covariate + " with about "
                    + Numbers.count(Math.round((double) rows / pools)) + " rows each";
        }
        return scenarios.sentence().strip()
                + (scenarios.sentence().isEmpty() ? "" : " ")
                + points
                + (adjusted ? ", at the fitted rate times observed / fitted events." : ".")
                + fit.warning();
    }

    private Grid numbers(RateText unit) {
        Curve chosen = at(quarters());
        Grid table = Grid.titled("")
                .numberColumn(covariate)
                .numberColumn("fitted " + unit.label())
                .numberColumn(fit.levelText() + " interval of the mean");
        for (int i = 0; i < chosen.values().length; i++) {
            Prediction p = chosen.rows().get(i);
            table = table.row(
                    Scenarios.value(chosen.values()[i]),
                    unit.text(p.rate()),
                    unit.interval(p.rateLower(), p.rateUpper()));
        }
        return table;
    }

    /** Returns the least value of the covariate, its quartiles and the greatest, each as observed and each once. */
    private double[] quarters() {
        double[] sorted = fit.table().numbers(covariate).toArray();
        Arrays.sort(sorted);
        return IntStream.rangeClosed(0, 4)
                .mapToDouble(quarter -> sorted[(int) Math.round(quarter / 4.0 * (sorted.length - 1))])
                .distinct()
                .toArray();
    }

    private static String capitalised(String text) {
        return Character.toUpperCase(text.charAt(0)) + text.substring(1);
    }

    private static double[] grid(double low, double high) {
        if (low == high) {
            return new double[] {low};
        }
        double[] grid = new double[CURVE_POINTS];
        for (int i = 0; i < CURVE_POINTS; i++) {
            grid[i] = i == CURVE_POINTS - 1 ? high : low + (high - low) * i / (CURVE_POINTS - 1);
        }
        return grid;
    }

    private static double highest(double[] values) {
        return Arrays.stream(values).filter(Double::isFinite).max().orElse(0);
    }
}
