package countwright.chart;

import countwright.show.Grid;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Comparator;
import java.util.List;
import java.util.stream.DoubleStream;

/** Variance against mean of the counts of groups, beside the line on which Poisson counts lie. */
final class MeanVarianceChart {

    private static final double LOG_FROM_RATIO = 20;
    private static final int LISTED = 40;

    /** A group's mean count, and the variance of its counts brought to that mean. */
    record Spread(String name, int rows, double mean, double variance) {

        double ratio() {
            return variance / mean;
        }
    }

    private MeanVarianceChart() {}

    /**
     * Returns the spread of each group with two rows or more and at least one event.
     *
     * @param means what is expected in each row if the counts are Poisson
     * @param rowsLost by how much each row's share of the sum of squares falls short of 1 because the means were
     *     estimated; NaN to lose one row in each group
     */
    static List<Spread> spreads(List<Groups.Group> groups, double[] counts, double[] means, double rowsLost) {
        List<Spread> spreads = new ArrayList<>();
        for (Groups.Group group : groups) {
            int n = group.size();
            double mean = group.sum(means) / n;
            if (n < 2 || !(mean > 0)) {
                continue;
            }
            double chiSquare = 0;
            for (int row : group.rows().toArray()) {
                double difference = counts[row] - means[row];
                chiSquare += difference * difference / means[row];
            }
            double divisor = Double.isNaN(rowsLost) ? n - 1 : n * (1 - rowsLost);
            spreads.add(new Spread(group.name(), n, mean, chiSquare / divisor * mean));
        }
        return spreads;
    }

    /** Returns what each row would count at its group's own rate. */
    static double[] meansAtGroupRate(List<Groups.Group> groups, double[] counts, double[] exposures) {
        double[] means = new double[counts.length];
        for (Groups.Group group : groups) {
            double rate = group.sum(counts) / group.sum(exposures);
            for (int row : group.rows().toArray()) {
                means[row] = rate * exposures[row];
            }
        }
        return means;
    }

    static Chart of(String count, String group, int groupCount, List<Spread> spreads, String definition) {
        if (spreads.isEmpty()) {
            throw new IllegalArgumentException("a variance needs two rows and at least one event, but no group of '"
                    + group + "' has them (" + NumberText.count(groupCount, "group", "groups")
                    + "). Choose a column with fewer, larger groups.");
        }
        boolean log = wantsLog(spreads);
        List<Spread> shown =
                log ? spreads.stream().filter(s -> s.variance() > 0).toList() : spreads;
        double[] means = shown.stream().mapToDouble(Spread::mean).toArray();
        double[] variances = shown.stream().mapToDouble(Spread::variance).toArray();
        // The vertical axis holds the means too, or the line would be out of sight where the variances are far from it.
        double[] both = DoubleStream.concat(Arrays.stream(means), Arrays.stream(variances))
                .toArray();
        Axis x = axis("mean of " + count + " in the group", means, log);
        Axis y = axis("variance of " + count + " in the group", both, log);
        double lineEnd = Math.min(x.max(), y.max());
        double lineStart = log ? Math.max(x.min(), y.min()) : 0;
        int left = groupCount - shown.size();
        Figure figure = Figure.titled("Variance against mean of " + count + ", by " + group, x, y)
                .subtitle(subtitle(spreads))
                .caption(definition
                        + (left == 0
                                ? ""
                                : " " + NumberText.count(left, "group is", "groups are")
                                        + " not shown: a single row, no event"
                                        + (log ? " or no variation, which has no place on a log axis." : ".")))
                .guide(new Figure.Guide(
                        "variance = mean, as for Poisson counts",
                        Ink.REFERENCE,
                        lineStart,
                        lineStart,
                        lineEnd,
                        lineEnd))
                .layer(Layer.points("one group", Ink.OBSERVED, means, variances));
        return Chart.of(figure, subtitle(spreads), grid(group, spreads).toString());
    }

    private static boolean wantsLog(List<Spread> spreads) {
        double[] positive = spreads.stream()
                .filter(s -> s.variance() > 0)
                .flatMapToDouble(s -> DoubleStream.of(s.mean(), s.variance()))
                .sorted()
                .toArray();
        return positive.length >= 6 && positive[positive.length - 1] / positive[0] > LOG_FROM_RATIO;
    }

    private static Axis axis(String title, double[] values, boolean log) {
        double low = Arrays.stream(values).min().orElse(0);
        double high = Arrays.stream(values).max().orElse(1);
        return log ? Axis.log(title, low, high, 7) : Axis.linearWithRoomAtZero(title, high, 6);
    }

    private static String subtitle(List<Spread> spreads) {
        long above = spreads.stream().filter(s -> s.ratio() > 1).count();
        double[] ratios = spreads.stream().mapToDouble(Spread::ratio).sorted().toArray();
        int middle = ratios.length / 2;
        double median = ratios.length % 2 == 1 ? ratios[middle] : (ratios[middle - 1] + ratios[middle]) / 2;
        return "The variance is above the mean in " + above + " of "
                + NumberText.count(spreads.size(), "group", "groups") + "; the median of variance / mean is "
                + NumberText.rounded(median) + " (1 for Poisson counts)";
    }

    private static Grid grid(String group, List<Spread> spreads) {
        Grid grid = Grid.titled("")
                .textColumn(group)
                .numberColumn("rows")
                .numberColumn("mean")
                .numberColumn("variance")
                .numberColumn("variance / mean");
        List<Spread> sorted = spreads.stream()
                .sorted(Comparator.comparingDouble(Spread::ratio).reversed())
                .toList();
        for (Spread spread : sorted.subList(0, Math.min(LISTED, sorted.size()))) {
            grid = grid.row(
                    spread.name(),
                    NumberText.count(spread.rows()),
                    NumberText.rounded(spread.mean()),
                    NumberText.rounded(spread.variance()),
                    NumberText.rounded(spread.ratio()));
        }
        return sorted.size() <= LISTED
                ? grid
                : grid.note("The " + LISTED + " groups with the largest ratio, of " + NumberText.count(sorted.size())
                        + ".");
    }
}
