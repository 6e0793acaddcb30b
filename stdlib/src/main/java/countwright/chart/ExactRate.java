package countwright.chart;

import org.apache.commons.math3.distribution.ChiSquaredDistribution;

/**
 * A rate with its exact interval for a Poisson count: count {@code y} over exposure {@code t},
 *
 * <pre>{@code
 * lower = chi2(a/2; 2y) / 2t,   0 where y = 0
 * upper = chi2(1 - a/2; 2y + 2) / 2t
 * }</pre>
 *
 * with {@code a = 1 - level} and {@code chi2(p; k)} the quantile of the chi-square distribution with k degrees of freedom.
 * It covers the true rate with at least the given probability, and treats the counts as Poisson: where they vary more,
 * the true uncertainty is larger. Source: Garwood (1936), doi:10.1093/biomet/28.3-4.437.
 */
record ExactRate(double rate, double lower, double upper) {

    private static final double ACCURACY = 1e-12;

    static ExactRate of(double count, double exposure, double level) {
        double tail = (1 - level) / 2;
        double lower = count == 0 ? 0 : quantile(tail, 2 * count) / (2 * exposure);
        double upper = quantile(1 - tail, 2 * count + 2) / (2 * exposure);
        return new ExactRate(count / exposure, lower, upper);
    }

    private static double quantile(double probability, double degreesOfFreedom) {
        return new ChiSquaredDistribution(degreesOfFreedom, ACCURACY).inverseCumulativeProbability(probability);
    }
}
