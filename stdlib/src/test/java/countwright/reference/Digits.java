package countwright.reference;

import java.util.Locale;

/**
 * Agreement in significant digits: {@code -log10(|actual - expected| / |expected|)}, or with the absolute difference where
 * the expected value is 0. Source: B. D. McCullough, <em>Assessing the Reliability of Statistical Software</em>, The American
 * Statistician 52, 1998.
 */
public final class Digits {

    /** What equal doubles score: more than a double holds. */
    public static final double EXACT = 17;

    private Digits() {}

    /** Returns the digits to which two numbers agree; 0 or less if they do not, {@link #EXACT} if they are equal. */
    public static double agreement(double expected, double actual) {
        if (expected == actual || (Double.isNaN(expected) && Double.isNaN(actual))) {
            return EXACT;
        }
        if (!Double.isFinite(expected) || !Double.isFinite(actual)) {
            return 0;
        }
        double scale = expected == 0 ? 1 : Math.abs(expected);
        return Math.min(EXACT, -Math.log10(Math.abs(actual - expected) / scale));
    }

    /** Fails unless two numbers agree to a number of significant digits; NaN and infinity agree with themselves only. */
    public static void assertDigits(double expected, double actual, double digits) {
        assertDigits("value", expected, actual, digits);
    }

    /** Fails unless two numbers agree to a number of significant digits, naming what they are. */
    public static void assertDigits(String what, double expected, double actual, double digits) {
        double found = agreement(expected, actual);
        if (!(found >= digits)) {
            throw new AssertionError(String.format(
                    Locale.ROOT,
                    "%s%n  expected: %s%n  actual:   %s%n  digits wanted: %.1f%n  digits found:  %.1f",
                    what,
                    expected,
                    actual,
                    digits,
                    found));
        }
    }
}
