package countwright.table;

import countwright.show.Numbers;
import java.math.BigDecimal;
import java.util.Locale;

/**
 * How the numbers of one column are written below each other: all to the same decimals, as many as the values have, but no
 * more than make six significant digits of the largest.
 */
final class CellFormat {

    private static final int DIGITS = 6;
    private static final double LARGEST_UNGROUPED = 9_999.5;

    private final int decimals;
    private final String pattern;

    private CellFormat(int decimals, String pattern) {
        this.decimals = decimals;
        this.pattern = pattern;
    }

    /** For values as they stand in the data: without separators, since they may be years or identifiers. */
    static CellFormat ofData(double... values) {
        int decimals = decimals(values);
        return new CellFormat(decimals, "%." + decimals + "f");
    }

    /** For summaries: with thousands separators, unless all are below ten thousand and may be years. */
    static CellFormat ofSummary(double... values) {
        int decimals = decimals(values);
        return new CellFormat(decimals, (largest(values) > LARGEST_UNGROUPED ? "%,." : "%.") + decimals + "f");
    }

    String text(double value) {
        double magnitude = Math.abs(value);
        boolean extreme = magnitude >= 1e15 || (magnitude > 0 && magnitude < 5 * Math.pow(10, -decimals - 1));
        if (!Double.isFinite(value) || extreme) {
            return Numbers.significant(value, 3);
        }
        return String.format(Locale.ROOT, pattern, value == 0 ? 0.0 : value);
    }

    private static int decimals(double[] values) {
        int written = 0;
        for (double value : values) {
            if (Double.isFinite(value) && Math.abs(value) < 1e15 && value != 0) {
                written = Math.max(
                        written, BigDecimal.valueOf(value).stripTrailingZeros().scale());
            }
        }
        double largest = largest(values);
        int whole = largest < 1 ? 0 : (int) Math.floor(Math.log10(largest)) + 1;
        return Math.min(written, Math.max(DIGITS - whole, 0));
    }

    private static double largest(double[] values) {
        double largest = 0;
        for (double value : values) {
            if (Double.isFinite(value) && Math.abs(value) < 1e15) {
                largest = Math.max(largest, Math.abs(value));
            }
        }
        return largest;
    }
}
