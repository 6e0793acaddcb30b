package countwright.table;

import countwright.show.Grid;
import countwright.show.Numbers;
import java.math.BigDecimal;
import java.math.MathContext;
import java.util.Arrays;
import java.util.List;

/** The figures of one column of numbers, over the values that are not missing. */
final class NumberSummary {

    private final NumberColumn column;
    private final double[] sorted;

    NumberSummary(NumberColumn column) {
        this.column = column;
        this.sorted = Arrays.stream(column.toArray())
                .filter(value -> !Double.isNaN(value))
                .sorted()
                .toArray();
    }

    static Grid grid() {
        return Grid.titled("")
                .textColumn("Numbers")
                .numberColumn("missing")
                .numberColumn("distinct")
                .numberColumn("least")
                .numberColumn("median")
                .numberColumn("mean")
                .numberColumn("greatest")
                .numberColumn("zeros")
                .numberColumn("total");
    }

    List<String> cells() {
        String missing = Numbers.count(column.size() - (long) sorted.length);
        if (sorted.length == 0) {
            String none = Numbers.ABSENT;
            return List.of(column.name(), missing, "0", none, none, none, none, "", "");
        }
        double least = sorted[0];
        double greatest = sorted[sorted.length - 1];
        double mean = total() / sorted.length;
        CellFormat format = CellFormat.ofSummary(least, median(), greatest);
        return List.of(
                column.name(),
                missing,
                Numbers.count(distinct()),
                format.text(least),
                format.text(median()),
                CellFormat.ofSummary(Math.max(Math.abs(least), Math.abs(greatest)), fourDigits(mean))
                        .text(mean),
                format.text(greatest),
                mayBeCounts() ? Numbers.percent(zeros() / (double) sorted.length) : "",
                mayBeCounts() ? Numbers.compact(total()) : "");
    }

    private static double fourDigits(double value) {
        return value == 0 || !Double.isFinite(value)
                ? value
                : new BigDecimal(value).round(new MathContext(4)).doubleValue();
    }

    private double median() {
        int middle = sorted.length / 2;
        return sorted.length % 2 == 1 ? sorted[middle] : sorted[middle - 1] / 2 + sorted[middle] / 2;
    }

    /** Returns the sum with Neumaier's compensation, so that long columns of money or kilometres add up. */
    private double total() {
        double sum = 0;
        double lost = 0;
        for (double value : sorted) {
            double next = sum + value;
            lost += Math.abs(sum) >= Math.abs(value) ? (sum - next) + value : (value - next) + sum;
            sum = next;
        }
        return Double.isFinite(lost) ? sum + lost : sum;
    }

    private long distinct() {
        long distinct = 1;
        for (int i = 1; i < sorted.length; i++) {
            distinct += sorted[i] == sorted[i - 1] ? 0 : 1;
        }
        return distinct;
    }

    private long zeros() {
        return Arrays.stream(sorted).filter(value -> value == 0).count();
    }

    private boolean mayBeCounts() {
        return sorted[0] >= 0 && Arrays.stream(sorted).allMatch(value -> value == Math.rint(value) && value < 1e15);
    }
}
