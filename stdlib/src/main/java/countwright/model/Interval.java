package countwright.model;

import countwright.show.Numbers;
import org.apache.commons.math3.distribution.NormalDistribution;
import org.apache.commons.math3.special.Erf;

/** Wald intervals and p-values: a normal distribution around the estimate on the log scale. */
final class Interval {

    static final double USUAL_LEVEL = 0.95;

    private Interval() {}

    /**
     * Returns the number of standard errors on either side of the estimate.
     *
     * @throws IllegalArgumentException if the level is not above 0 and below 1
     */
    static double halfWidth(double level) {
        if (!(level > 0 && level < 1)) {
            String percent =
                    level > 1 && level < 100 ? " For " + Numbers.compact(level) + "% write " + level / 100 + "." : "";
            throw new IllegalArgumentException(
                    "a confidence level lies above 0 and below 1, but this one is " + level + "." + percent);
        }
        return new NormalDistribution(0, 1).inverseCumulativeProbability(0.5 + level / 2);
    }

    /** Returns the probability of a standard normal value at least as far from 0 as z, on either side. */
    static double twoSidedP(double z) {
        return Erf.erfc(Math.abs(z) / Math.sqrt(2));
    }

    /** Returns the level in words, such as "95%" or "99.5%". */
    static String percent(double level) {
        double percent = Math.rint(level * 1e5) / 1e3;
        return (percent == Math.rint(percent) ? Long.toString((long) percent) : Double.toString(percent)) + "%";
    }
}
