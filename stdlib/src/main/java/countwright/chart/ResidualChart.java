package countwright.chart;

import countwright.model.Residual;
import countwright.show.Grid;
import countwright.show.Numbers;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/** Residuals of a model against its fitted means. */
final class ResidualChart {

    private static final int CROWD = 200;
    private static final int MOST_POINTS = 6_000;
    private static final int BINS = 20;
    private static final int ROWS_FOR_AVERAGES = 100;
    private static final double ALWAYS_SHOWN = 3;
    private static final double LOG_FROM_RATIO = 20;

    private ResidualChart() {}

    static Chart of(Fit fit, Residual kind) {
        double[] means = fit.means().get();
        double[] residuals = fit.residuals().apply(kind);
        if (means.length == 0) {
            throw new IllegalArgumentException("there is nothing to draw: the model used no row.");
        }
        String name = switch (kind) {
            case DEVIANCE -> "deviance residual";
            case PEARSON -> "Pearson residual";
            case STANDARDISED_DEVIANCE -> "standardised deviance residual";
            case STANDARDISED_PEARSON -> "standardised Pearson residual";
        };
        int[] usable = usable(means, residuals);
        double[] x = pick(means, usable);
        double[] y = pick(residuals, usable);
        if (x.length == 0) {
            throw new IllegalArgumentException("there is nothing to draw: no row has a " + name + " (of "
                    + Numbers.count(means.length, "row") + "). Try another kind of residual.");
        }
        double low = Arrays.stream(x).min().orElseThrow();
        double high = Arrays.stream(x).max().orElseThrow();
        double lowest = Math.min(-2.4, Arrays.stream(y).min().orElseThrow());
        double highest = Math.max(2.4, Arrays.stream(y).max().orElseThrow());
        double air = 0.04 * (highest - lowest);
        boolean log = high / low > LOG_FROM_RATIO && low > 0;
        String xTitle = "fitted mean " + fit.response();
        Axis xAxis = log ? Axis.log(xTitle, low, high, 7) : Axis.linear(xTitle, low, high, 7);
        Axis yAxis = new Axis(
                name, Axis.Scale.LINEAR, lowest - air, highest + air, Axis.linearTicks(lowest - air, highest + air, 6));

        int[] drawn = drawn(y);
        long beyond = Arrays.stream(y).filter(r -> Math.abs(r) > 2).count();
        String share = Numbers.count(beyond) + " of " + Numbers.count(y.length, "row") + " ("
                + Numbers.percent((double) beyond / y.length) + ") lie beyond \u00b12";
        String title = Character.toUpperCase(name.charAt(0)) + name.substring(1) + "s against fitted means";
        Figure figure = Figure.titled(title, xAxis, yAxis)
                .subtitle(share + "; about 5% would if the model held and counts were not too small")
                .caption((caption(x.length, drawn.length, means.length, medianOf(x)) + fit.warning()).strip())
                .guide(Figure.Guide.across("", Ink.REFERENCE, xAxis, 0))
                .guide(Figure.Guide.across("\u00b12", Ink.LIMIT, xAxis, 2))
                .guide(Figure.Guide.across("", Ink.LIMIT, xAxis, -2))
                .layer(Layer.points(
                        "one row",
                        drawn.length > CROWD ? Ink.OBSERVED_CROWD : Ink.OBSERVED,
                        pick(x, drawn),
                        pick(y, drawn)));
        Grid grid = quantiles(name, y);
        if (x.length >= ROWS_FOR_AVERAGES) {
            figure = averages(figure, x, y);
        }
        return Chart.of(figure, share + ".", grid.toString());
    }

    private static Figure averages(Figure figure, double[] x, double[] y) {
        List<Groups.Group> bins = Groups.byQuantile(x, BINS);
        double[] middles =
                bins.stream().mapToDouble(bin -> bin.sum(x) / bin.size()).toArray();
        double[] averages =
                bins.stream().mapToDouble(bin -> bin.sum(y) / bin.size()).toArray();
        return figure.layer(Layer.line("", Ink.AVERAGE, middles, averages))
                .layer(Layer.points(
                        "average of about " + Numbers.count(Math.round((double) x.length / bins.size())) + " rows",
                        Ink.AVERAGE,
                        middles,
                        averages));
    }

    private static String caption(int usable, int drawn, int all, double medianMean) {
        StringBuilder caption = new StringBuilder();
        if (drawn < usable) {
            caption.append("Drawn are ")
                    .append(Numbers.count(drawn))
                    .append(" of ")
                    .append(Numbers.count(usable))
                    .append(" rows, evenly spaced through the table, and every residual beyond \u00b13;"
                            + " averages are of all rows.");
        }
        if (usable < all) {
            caption.append(" ")
                    .append(Numbers.count(all - usable, "row") + (all - usable == 1 ? " has" : " have"))
                    .append(" no such residual and no place here.");
        }
        if (medianMean < 3) {
            caption.append(" Most fitted means are below 3: residuals then lie in stripes, one for each count, and the"
                    + " guide at \u00b12 is rough.");
        }
        return caption.toString().strip();
    }

    private static Grid quantiles(String name, double[] residuals) {
        double[] sorted = residuals.clone();
        Arrays.sort(sorted);
        Grid grid = Grid.titled("").textColumn("").numberColumn(name);
        String[] labels = {"least", "lower quarter", "median", "upper quarter", "greatest"};
        for (int i = 0; i < labels.length; i++) {
            double value = sorted[(int) Math.round(i / 4.0 * (sorted.length - 1))];
            grid = grid.row(labels[i], Numbers.fixed(value, 2));
        }
        return grid;
    }

    private static int[] usable(double[] means, double[] residuals) {
        List<Integer> rows = new ArrayList<>();
        for (int row = 0; row < means.length; row++) {
            if (Double.isFinite(residuals[row]) && means[row] > 0 && Double.isFinite(means[row])) {
                rows.add(row);
            }
        }
        return rows.stream().mapToInt(Integer::intValue).toArray();
    }

    /** Returns which points are drawn: all, or of very many an even share and the far ones. */
    private static int[] drawn(double[] residuals) {
        int stride = Math.max(1, (int) Math.ceil((double) residuals.length / MOST_POINTS));
        List<Integer> rows = new ArrayList<>();
        for (int row = 0; row < residuals.length; row++) {
            if (row % stride == 0 || Math.abs(residuals[row]) > ALWAYS_SHOWN) {
                rows.add(row);
            }
        }
        return rows.stream().mapToInt(Integer::intValue).toArray();
    }

    private static double medianOf(double[] values) {
        double[] sorted = values.clone();
        Arrays.sort(sorted);
        return sorted[sorted.length / 2];
    }

    private static double[] pick(double[] values, int[] rows) {
        return Arrays.stream(rows).mapToDouble(row -> values[row]).toArray();
    }
}
