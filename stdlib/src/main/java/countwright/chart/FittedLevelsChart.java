package countwright.chart;

import countwright.model.Prediction;
import countwright.show.Grid;
import countwright.show.Numbers;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;

/** What a model fits for the levels of one covariate, beside what was observed. */
final class FittedLevelsChart {

    /** How far, in rows, an observed rate stands below the estimate it belongs to. */
    private static final double BELOW = 0.27;

    private record LevelRate(String name, Prediction fitted, double observed, double count, double exposure) {}

    private FittedLevelsChart() {}

    static Chart of(Fit fit, String covariate, Scenarios scenarios) {
        List<Groups.Group> groups = Groups.byValue(fit.table().column(covariate));
        int[] firstRows = groups.stream().mapToInt(Groups.Group::firstRow).toArray();
        List<Prediction> predictions = fit.predict().apply(scenarios.atRows(firstRows));
        double[] counts = fit.counts().get();
        double[] exposures = fit.exposures().get();
        List<LevelRate> all = new ArrayList<>();
        for (int i = 0; i < groups.size(); i++) {
            double count = groups.get(i).sum(counts);
            double exposure = groups.get(i).sum(exposures);
            all.add(new LevelRate(groups.get(i).name(), predictions.get(i), count / exposure, count, exposure));
        }
        List<LevelRate> shown = all.stream()
                .sorted(Comparator.comparingDouble(LevelRate::exposure).reversed())
                .limit(RateChart.MOST_ROWS)
                .sorted(Comparator.comparingDouble((LevelRate l) -> l.fitted().rate())
                        .reversed()
                        .thenComparing(LevelRate::name))
                .toList();
        return draw(fit, covariate, scenarios, shown, all.size());
    }

    private static Chart draw(Fit fit, String covariate, Scenarios scenarios, List<LevelRate> shown, int levels) {
        int size = shown.size();
        double highestRate = 0;
        double highestEnd = 0;
        for (LevelRate level : shown) {
            highestRate = Math.max(
                    highestRate, Math.max(level.observed(), level.fitted().rate()));
            highestEnd = Math.max(
                    highestEnd,
                    Math.max(level.observed(), finiteOr(level.fitted().rateUpper(), 0)));
        }
        RateText unit = RateText.forRates(fit.response(), fit.exposure(), highestRate);
        // An interval without end (a level without events) must not squeeze all others into a corner.
        double axisEnd = Math.min(highestEnd, 5 * highestRate) * unit.factor();
        double[] fitted = new double[size];
        double[] lower = new double[size];
        double[] upper = new double[size];
        double[] observed = new double[size];
        double[] fittedY = new double[size];
        double[] observedY = new double[size];
        List<Figure.NamedRow> rows = new ArrayList<>();
        Grid grid = Grid.titled("")
                .textColumn(covariate)
                .numberColumn("fitted " + unit.label())
                .numberColumn(fit.levelText() + " interval")
                .numberColumn("observed");
        for (int i = 0; i < size; i++) {
            LevelRate level = shown.get(i);
            Prediction p = level.fitted();
            fitted[i] = p.rate() * unit.factor();
            lower[i] = p.rateLower() * unit.factor();
            upper[i] = finiteOr(p.rateUpper(), 1e6 * highestRate) * unit.factor();
            observed[i] = level.observed() * unit.factor();
            fittedY[i] = size - i;
            observedY[i] = size - i - BELOW;
            rows.add(new Figure.NamedRow(level.name(), unit.text(p.rate(), p.rateLower(), p.rateUpper())));
            grid = grid.row(
                    level.name(),
                    unit.text(p.rate()),
                    unit.interval(p.rateLower(), p.rateUpper()),
                    unit.text(level.observed()));
        }
        boolean adjusted = fit.covariates().size() > 1;
        String what = fit.exposure().isEmpty() ? "mean count" : "rate";
        String left = size == levels
                ? ""
                : " Shown are the " + size + " of " + Numbers.count(levels) + " levels with the largest exposure.";
        LevelRate top = shown.get(0);
        LevelRate bottom = shown.get(size - 1);
        Figure figure = Figure.titled(
                        "Fitted " + what + " by " + covariate,
                        Axis.linearWithRoomAtZero(unit.label(), axisEnd, 7),
                        Axis.rows(size))
                .subtitle("From " + unit.text(bottom.fitted().rate()) + " in " + bottom.name() + " to "
                        + unit.text(top.fitted().rate()) + " in " + top.name())
                .caption("Highest fitted " + what + " on top." + scenarios.sentence()
                        + (adjusted
                                ? " Observed " + what + "s are "
                                        + (fit.exposure().isEmpty()
                                                ? "averages of all rows"
                                                : "all events over all exposure")
                                        + ", not adjusted for them."
                                : "")
                        + left
                        + fit.warning())
                .rows("fitted (" + fit.levelText() + " interval)", rows)
                .layer(Layer.barsAcross(fit.levelText() + " interval of the mean", Ink.FITTED, lower, upper, fittedY))
                .layer(Layer.points(
                        adjusted ? "observed, not adjusted" : "observed", Ink.OBSERVED_BESIDE, observed, observedY))
                .layer(Layer.points("fitted", Ink.FITTED, fitted, fittedY));
        String summary = "Fitted " + unit.label() + " is highest in " + top.name() + " at " + text(unit, top)
                + (size == 1 ? "." : " and lowest in " + bottom.name() + " at " + text(unit, bottom) + ".")
                + scenarios.sentence();
        return Chart.of(figure, summary, grid.toString());
    }

    private static String text(RateText unit, LevelRate level) {
        Prediction p = level.fitted();
        return unit.text(p.rate(), p.rateLower(), p.rateUpper());
    }

    private static double finiteOr(double value, double other) {
        return Double.isFinite(value) ? value : other;
    }
}
