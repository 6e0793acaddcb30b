package countwright.show;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.util.Locale;

/**
 * Numbers as text for readers: as many digits as they carry meaning, and no more.
 *
 * <p>Rules that hold throughout: thousands are grouped with commas and decimals follow a point, in every locale; a number
 * other than zero never reads as zero; the digits before the decimal point are never rounded away; scientific notation
 * ("1.2e-7") is kept for magnitudes below 0.00001 and from 1e15 on; a missing number (NaN) is {@link #ABSENT}.
 */
public final class Numbers {

    /** What stands where there is no number. */
    public static final String ABSENT = "–";

    private static final double TINY = 1e-5;
    private static final double HUGE = 1e15;

    private Numbers() {}

    /** Returns a whole number with grouped thousands: 1234567 gives "1,234,567". */
    public static String count(long value) {
        return String.format(Locale.ROOT, "%,d", value);
    }

    /** Returns a count with its noun: "1 row", "5,479 rows". The plural adds an s. */
    public static String count(long value, String noun) {
        return count(value) + " " + noun + (value == 1 ? "" : "s");
    }

    /**
     * Returns a number as short as is useful in a table: whole numbers in full, others to four significant digits without
     * trailing zeros.
     */
    public static String compact(double value) {
        if (isOrdinary(value) && value == Math.rint(value)) {
            return fixed(value, 0);
        }
        String text = significant(value, 4);
        int exponent = text.indexOf('e');
        String tail = exponent < 0 ? "" : text.substring(exponent);
        String digits = exponent < 0 ? text : text.substring(0, exponent);
        if (digits.indexOf('.') >= 0) {
            int end = digits.length();
            while (digits.charAt(end - 1) == '0') {
                end--;
            }
            digits = digits.substring(0, digits.charAt(end - 1) == '.' ? end - 1 : end);
        }
        return digits + tail;
    }

    /**
     * Returns a number to some significant digits, trailing zeros kept: 1 to three digits gives "1.00", 0.012345 gives
     * "0.0123", 12345.6 gives "12,346".
     *
     * @param digits how many, from 1 to 17
     * @throws IllegalArgumentException if digits is out of range
     */
    public static String significant(double value, int digits) {
        if (digits < 1 || digits > 17) {
            throw new IllegalArgumentException(
                    "significant digits must be from 1 to 17, but digits is " + digits + ".");
        }
        if (!Double.isFinite(value)) {
            return notFinite(value);
        }
        if (value == 0) {
            return fixed(0, digits - 1);
        }
        BigDecimal rounded = BigDecimal.valueOf(value).round(new MathContext(digits, RoundingMode.HALF_EVEN));
        if (!isOrdinary(value)) {
            return scientific(rounded, digits);
        }
        int exponent = rounded.precision() - rounded.scale() - 1;
        return grouped(value, Math.max(0, digits - 1 - exponent));
    }

    /**
     * Returns a number to some decimals; where that would turn a number other than zero into zeros, its first significant
     * digit instead: 0.0004 to two decimals gives "0.0004".
     *
     * @param decimals how many, from 0 to 17
     * @throws IllegalArgumentException if decimals is out of range
     */
    public static String fixed(double value, int decimals) {
        if (decimals < 0 || decimals > 17) {
            throw new IllegalArgumentException("decimals must be from 0 to 17, but decimals is " + decimals + ".");
        }
        if (!Double.isFinite(value)) {
            return notFinite(value);
        }
        if (value != 0 && (Math.abs(value) >= HUGE || readsAsZero(value, decimals))) {
            return significant(value, value >= HUGE || value <= -HUGE ? 4 : 1);
        }
        return grouped(value, decimals);
    }

    /**
     * Returns an estimate to the decimals at which its standard error has two significant digits: 1.23456 with standard
     * error 0.0321 gives "1.235". Without a positive, finite standard error: four significant digits.
     */
    public static String estimate(double value, double standardError) {
        return standardError > 0 && standardError < HUGE && isOrdinary(value)
                ? fixed(value, decimals(standardError, 2))
                : significant(value, 4);
    }

    /**
     * Returns an interval, both ends to the same decimals, so that the end nearer to zero has at least three significant
     * digits and the width at least two: "0.871 to 1.234".
     */
    public static String interval(double lower, double upper) {
        double width = Math.abs(upper - lower);
        double smaller = Math.min(Math.abs(lower), Math.abs(upper));
        double larger = Math.max(Math.abs(lower), Math.abs(upper));
        if (!isOrdinary(lower) || !isOrdinary(upper) || larger == 0) {
            return significant(lower, 3) + " to " + significant(upper, 3);
        }
        int byMagnitude = decimals(smaller > larger / 1000 ? smaller : larger, 3);
        int byWidth = width > 0 ? decimals(width, 2) : 0;
        int decimals = Math.min(10, Math.max(byMagnitude, byWidth));
        return fixed(lower, decimals) + " to " + fixed(upper, decimals);
    }

    /** Returns a p-value: "<0.0001", then one significant digit up to 0.001, three decimals up to 0.1, else two. */
    public static String pValue(double p) {
        if (Double.isNaN(p)) {
            return ABSENT;
        }
        if (!(p >= 0 && p <= 1)) {
            throw new IllegalArgumentException("a p-value lies from 0 to 1, but this one is " + p + ".");
        }
        if (p < 0.0001) {
            return "<0.0001";
        }
        if (p > 0.99) {
            return p == 1 ? "1" : ">0.99";
        }
        return grouped(p, p < 0.001 ? 4 : p < 0.1 ? 3 : 2);
    }

    /** Returns a fraction as a percentage with one decimal: 0.1234 gives "12.3%"; "<0.1%" and ">99.9%" near the ends. */
    public static String percent(double fraction) {
        if (!Double.isFinite(fraction)) {
            return notFinite(fraction);
        }
        double percent = 100 * fraction;
        if (percent != 0 && Math.abs(percent) < 0.1) {
            return percent > 0 ? "<0.1%" : ">-0.1%";
        }
        if (percent > 99.9 && percent < 100) {
            return ">99.9%";
        }
        return percent == 0 || percent == 100 ? grouped(percent, 0) + "%" : fixed(percent, 1) + "%";
    }

    /** Returns the decimals at which a positive number has some significant digits, at least 0 and at most 17. */
    private static int decimals(double positive, int digits) {
        BigDecimal rounded = BigDecimal.valueOf(positive).round(new MathContext(digits, RoundingMode.HALF_EVEN));
        int exponent = rounded.precision() - rounded.scale() - 1;
        return Math.min(17, Math.max(0, digits - 1 - exponent));
    }

    private static boolean isOrdinary(double value) {
        double magnitude = Math.abs(value);
        return value == 0 || (magnitude >= TINY && magnitude < HUGE);
    }

    private static boolean readsAsZero(double value, int decimals) {
        return BigDecimal.valueOf(value)
                        .setScale(decimals, RoundingMode.HALF_EVEN)
                        .signum()
                == 0;
    }

    private static String grouped(double value, int decimals) {
        BigDecimal rounded = BigDecimal.valueOf(value).setScale(decimals, RoundingMode.HALF_EVEN);
        return String.format(Locale.ROOT, "%,." + decimals + "f", rounded);
    }

    private static String scientific(BigDecimal rounded, int digits) {
        int exponent = rounded.precision() - rounded.scale() - 1;
        BigDecimal mantissa = rounded.movePointLeft(exponent).setScale(digits - 1, RoundingMode.HALF_EVEN);
        return mantissa.toPlainString() + "e" + exponent;
    }

    private static String notFinite(double value) {
        return Double.isNaN(value) ? ABSENT : value > 0 ? "∞" : "-∞";
    }
}
