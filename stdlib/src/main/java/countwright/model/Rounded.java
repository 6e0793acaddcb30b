package countwright.model;

import countwright.show.Numbers;

/**
 * An estimate and its interval as text, all to the decimals at which the standard error has two digits: more would be noise,
 * and unequal decimals are hard to compare.
 *
 * @param estimate the estimate
 * @param interval its interval, such as "0.41 to 0.82"
 */
record Rounded(String estimate, String interval) {

    private static final double SMALLEST = 1e-5;
    private static final double LARGEST = 1e9;
    private static final int MOST_DECIMALS = 8;

    /** Returns a ratio and its interval, to enough decimals that an end near 1 stays on its side of 1. */
    static Rounded ofRatio(double ratio, double standardError, double lower, double upper) {
        Rounded rounded = of(ratio, standardError, lower, upper);
        for (int i = 0; i < 2 && readsAsOne(rounded.interval(), lower, upper); i++) {
            rounded = of(ratio, standardError / Math.pow(10, i + 1), lower, upper);
        }
        return new Rounded(of(ratio, standardError, lower, upper).estimate(), rounded.interval());
    }

    private static boolean readsAsOne(String interval, double lower, double upper) {
        String[] ends = interval.split(" to ", 2);
        return (lower != 1 && ends[0].matches("1(\\.0+)?")) || (upper != 1 && ends[1].matches("1(\\.0+)?"));
    }

    static Rounded of(double estimate, double standardError, double lower, double upper) {
        if (estimate == 0) {
            return new Rounded("0", "0 to " + Numbers.compact(upper));
        }
        boolean plain = standardError > 0 && Double.isFinite(standardError) && estimate >= SMALLEST && upper < LARGEST;
        if (!plain) {
            return new Rounded(
                    Numbers.significant(estimate, 3),
                    Numbers.significant(lower, 3) + " to " + Numbers.significant(upper, 3));
        }
        if (standardError > estimate) {
            // The ends differ by orders of magnitude; no one number of decimals suits both.
            return new Rounded(
                    Numbers.significant(estimate, 2),
                    Numbers.significant(lower, 2) + " to " + Numbers.significant(upper, 2));
        }
        // An error of 0.96 to 0.99 rounds up to two digits with one decimal less; that one digit more does no harm.
        int decimals = 1 - (int) Math.floor(Math.log10(standardError));
        int shown = Math.max(0, Math.min(MOST_DECIMALS, decimals));
        return new Rounded(
                Numbers.fixed(estimate, shown), Numbers.fixed(lower, shown) + " to " + Numbers.fixed(upper, shown));
    }
}
