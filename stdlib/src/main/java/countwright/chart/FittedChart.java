package countwright.chart;

import countwright.model.Prediction;
import countwright.show.Grid;
import countwright.table.NumberColumn;
import countwright.table.Table;
import java.util.Arrays;
import java.util.List;

/** What a model fits over one covariate taken as a number, beside what was observed. */
final class FittedChart {

    private static final int CURVE_POINTS = 121;
    private static final int MOST_SINGLE_ROWS = 60;
    private static final int BINS = 20;

    private final Fit fit;
    private final String covariate;
    private final Scenarios scenarios;

    private FittedChart(Fit fit, String covariate) {
        this.fit = fit;
        this.covariate = covariate;
        this.scenarios = new Scenarios(fit, covariate);
    }

    static Chart of(Fit fit, String covariate) {
        fit.checkCovariate(covariate);
        if (fit.table().rowCount() == 0) {
            throw new IllegalArgumentException("there is nothing to draw: the model used no row.");
        }
        return fit.isNumberIn(covariate)
                ? new FittedChart(fit, covariate).curve()
                : FittedLevelsChart.of(fit, covariate, new Scenarios(fit, covariate));
    }

    private Chart curve() {
        double[] values = fit.table().numbers(covariate).toArray();
        double[] counts = fit.counts().get();
        double[] exposures = fit.exposures().get();
        double low = Arrays.stream(values).min().orElseThrow();
        double high = Arrays.stream(values).max().orElseThrow();
        double[] grid = grid(low, high);
        List<Prediction> curve = fit.predict().apply(scenarios.at(grid));
        double[] rates = curve.stream().mapToDouble(Prediction::rate).toArray();
        double[] lower = curve.stream().mapToDouble(Prediction::rateLower).toArray();
        double[] upper = curve.stream().mapToDouble(Prediction::rateUpper).toArray();

        boolean single = values.length <= MOST_SINGLE_ROWS;
        List<Groups.Group> pools = Groups.byQuantile(values, single ? values.length : BINS);
        double[] pooledX = new double[pools.size()];
        double[] observed = new double[pools.size()];
        for (int i = 0; i < pooledX.length; i++) {
            Groups.Group pool = pools.get(i);
            double exposure = pool.sum(exposures);
            for (int row : pool.rows().toArray()) {
                pooledX[i] += values[row] * exposures[row] / exposure;
            }
            observed[i] = pool.sum(counts) / exposure;
        }

        double top = Math.max(highest(upper), highest(observed));
        RateUnit unit = RateUnit.forRates(fit.response(), fit.exposure(), Math.max(highest(rates), highest(observed)));
        Axis x = Axis.linear(covariate, low, high, 8);
        Axis y = Axis.linearWithRoomAtZero(unit.label(), top * unit.factor(), 6);
        Ink pointInk = Ink.OBSERVED;
        String title = (fit.exposure().isEmpty() ? "Fitted mean count over " : "Fitted rate over ") + covariate;
        String span = unit.label() + ": " + unit.text(rates[0]) + " at " + covariate + " " + NumberText.plain(grid[0])
                + (grid.length == 1
                        ? ""
                        : ", " + unit.text(rates[rates.length - 1]) + " at " + NumberText.plain(grid[grid.length - 1]));
        Figure figure = Figure.titled(title, x, y)
                .subtitle(span)
                .caption(caption(pools.size(), single))
                .layer(Layer.band(
                        fit.levelText() + " interval of the mean",
                        Ink.BAND,
                        grid,
                        unit.scaled(lower),
                        unit.scaled(upper)))
                .layer(Layer.line("fitted", Ink.FITTED, grid, unit.scaled(rates)))
                .layer(Layer.points(pointName(single), pointInk, pooledX, unit.scaled(observed)));
        String summary = "Fitted " + span + "." + scenarios.sentence();
        return Chart.of(figure, summary, numbers(unit, grid).toString());
    }

    private String pointName(boolean single) {
        String what = fit.exposure().isEmpty() ? "count" : "rate";
        return single
                ? "observed " + what
                : fit.exposure().isEmpty() ? "observed mean, pooled" : "observed rate, pooled";
    }

    private String caption(int pools, boolean single) {
        int rows = fit.table().rowCount();
        String points = single && pools == rows
                ? "Each point is one row."
                : single
                        ? "Each point pools the rows with one value of " + covariate + "."
                        : "Each point pools one of " + pools + " bins of " + covariate + " with about "
                                + NumberText.count(Math.round((double) rows / pools)) + " rows each"
                                + (fit.exposure().isEmpty() ? "" : ": all events over all exposure") + ".";
        return points
                + (fit.covariates().size() > 1 ? " Points are not adjusted for other covariates." : "")
                + scenarios.sentence();
    }

    private Grid numbers(RateUnit unit, double[] grid) {
        double[] chosen = grid.length == 1
                ? grid
                : new double[] {
                    grid[0],
                    grid[(grid.length - 1) / 4],
                    grid[(grid.length - 1) / 2],
                    grid[3 * (grid.length - 1) / 4],
                    grid[grid.length - 1]
                };
        Table at = scenarios.at(chosen);
        List<Prediction> predictions = fit.predict().apply(at);
        NumberColumn values = at.numbers(covariate);
        Grid table = Grid.titled("")
                .numberColumn(covariate)
                .numberColumn("fitted " + unit.label())
                .numberColumn(fit.levelText() + " interval of the mean");
        for (int i = 0; i < chosen.length; i++) {
            Prediction p = predictions.get(i);
            table = table.row(
                    NumberText.plain(values.value(i)),
                    unit.text(p.rate()),
                    unit.text(p.rateLower()) + " to " + unit.text(p.rateUpper()));
        }
        return table;
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
