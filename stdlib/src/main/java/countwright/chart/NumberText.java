package countwright.chart;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.util.Locale;

/** Numbers as a reader wants them in a figure: "1,000", "0.002", "4.21"; the same in every locale. */
final class NumberText {

    private NumberText() {}

    /** Returns a value with a fixed number of decimals and commas between thousands. */
    static String fixed(double value, int decimals) {
        String text = String.format(Locale.ROOT, "%,." + decimals + "f", value);
        return isZero(text) && text.startsWith("-") ? text.substring(1) : text;
    }

    /** Returns a value rounded to three significant digits, keeping every digit of a whole part. */
    static String rounded(double value) {
        if (!Double.isFinite(value)) {
            return Double.isNaN(value) ? "unknown" : value > 0 ? "infinite" : "-infinite";
        }
        if (value == 0) {
            return "0";
        }
        if (Math.abs(value) >= 1e15 || Math.abs(value) < 1e-9) {
            return String.format(Locale.ROOT, "%.2e", value);
        }
        int magnitude = (int) Math.floor(Math.log10(Math.abs(value)));
        return fixed(value, Math.max(0, 2 - magnitude));
    }

    /** Returns a value with up to four significant decimals and no trailing zeros: for data as they are. */
    static String plain(double value) {
        if (!Double.isFinite(value) || Math.abs(value) >= 1e15 || (value != 0 && Math.abs(value) < 1e-9)) {
            return rounded(value);
        }
        if (value == Math.rint(value)) {
            return fixed(value, 0);
        }
        int wholeDigits = Math.max(0, (int) Math.floor(Math.log10(Math.abs(value))) + 1);
        BigDecimal shortened = new BigDecimal(value)
                .round(new MathContext(Math.max(4, wholeDigits + 1), RoundingMode.HALF_EVEN))
                .stripTrailingZeros();
        return fixed(shortened.doubleValue(), Math.max(0, shortened.scale()));
    }

    static String count(long value) {
        return String.format(Locale.ROOT, "%,d", value);
    }

    /** Returns "1 row" or "3 rows". */
    static String count(long value, String one, String many) {
        return count(value) + " " + (value == 1 ? one : many);
    }

    private static boolean isZero(String text) {
        return text.chars().noneMatch(c -> c >= '1' && c <= '9');
    }
}
