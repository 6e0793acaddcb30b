package countwright.chart;

import countwright.model.RateRatio;
import countwright.show.Grid;
import countwright.show.Numbers;
import java.util.ArrayList;
import java.util.List;

/** Rate ratios with their intervals on one log axis, in the order of the terms. */
final class RateRatioChart {

    /** Intervals wider than this many times beyond the outermost estimate run off the axis. */
    private static final double WIDEST = 8;

    private RateRatioChart() {}

    static Chart of(Fit fit) {
        List<RateRatio> drawable = fit.rateRatios().stream()
                .filter(r -> r.ratio() > 0 && Double.isFinite(r.ratio()) && r.lower() > 0 && !Double.isNaN(r.upper()))
                .toList();
        if (drawable.isEmpty()) {
            throw new IllegalArgumentException(
                    fit.rateRatios().isEmpty()
                            ? "there is nothing to draw: the model has a baseline only, and so no rate ratio. Add a term with on(...)."
                            : "there is nothing to draw: no rate ratio of the model is a finite number. Look at notices() of the model for the reason.");
        }
        List<RateRatio> shown = drawable.subList(0, Math.min(RateChart.MOST_ROWS, drawable.size()));
        double least = shown.stream().mapToDouble(RateRatio::ratio).min().orElseThrow();
        double greatest = shown.stream().mapToDouble(RateRatio::ratio).max().orElseThrow();
        double low = Math.min(
                1,
                Math.max(
                        shown.stream().mapToDouble(RateRatio::lower).min().orElseThrow(), Math.min(1, least) / WIDEST));
        double high = Math.max(
                1,
                Math.min(
                        shown.stream().mapToDouble(RateRatio::upper).max().orElseThrow(),
                        Math.max(1, greatest) * WIDEST));
        Axis x = Axis.log("rate ratio", low, high, 8);
        return draw(fit, shown, x);
    }

    private static Chart draw(Fit fit, List<RateRatio> shown, Axis x) {
        int size = shown.size();
        double[] ratios = new double[size];
        double[] lower = new double[size];
        double[] upper = new double[size];
        double[] y = new double[size];
        List<Figure.NamedRow> rows = new ArrayList<>();
        Grid grid = Grid.titled("")
                .textColumn("effect")
                .numberColumn("rate ratio")
                .numberColumn(fit.levelText() + " interval");
        boolean runsOff = false;
        int awayFromOne = 0;
        for (int i = 0; i < size; i++) {
            RateRatio r = shown.get(i);
            ratios[i] = r.ratio();
            lower[i] = Math.max(r.lower(), x.min() / 2);
            upper[i] = Math.min(r.upper(), x.max() * 2);
            runsOff |= r.lower() < x.min() || r.upper() > x.max();
            awayFromOne += r.lower() > 1 || r.upper() < 1 ? 1 : 0;
            y[i] = size - i;
            rows.add(new Figure.NamedRow(r.name(), r.ratioText() + " (" + r.intervalText() + ")"));
            grid = grid.row(r.name(), r.ratioText(), r.intervalText());
        }
        Axis rowAxis = Axis.rows(size);
        int left = fit.rateRatios().size() - size;
        Figure figure = Figure.titled("Rate ratios for " + fit.response(), x, rowAxis)
                .subtitle(
                        size == 1
                                ? ""
                                : "The " + fit.levelText() + " interval leaves out 1 for " + awayFromOne + " of "
                                        + size)
                .caption("Right of 1: a higher rate. Each ratio holds with the other terms unchanged."
                        + (runsOff ? " Some intervals go beyond the axis; their ends are in the numbers." : "")
                        + (left == 0
                                ? ""
                                : " " + Numbers.count(left, "ratio") + (left == 1 ? " is" : " are") + " not shown.")
                        + fit.warning())
                .rows("rate ratio (" + fit.levelText() + " interval)", rows)
                .guide(Figure.Guide.up("no difference", Ink.REFERENCE, rowAxis, 1))
                .layer(Layer.barsAcross(fit.levelText() + " interval", Ink.FITTED, lower, upper, y))
                .layer(Layer.points("estimate", Ink.FITTED, ratios, y));
        StringBuilder summary = new StringBuilder();
        for (RateRatio r : shown.subList(0, Math.min(6, size))) {
            summary.append(summary.isEmpty() ? "" : "; ")
                    .append(r.name())
                    .append(": ")
                    .append(r.ratioText());
        }
        return Chart.of(figure, summary + (size > 6 ? "; and " + (size - 6) + " more." : "."), grid.toString());
    }
}
