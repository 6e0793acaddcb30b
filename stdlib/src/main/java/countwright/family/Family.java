package countwright.family;

/**
 * A distribution of counts {@code y = 0, 1, 2, …} given its mean {@code mu > 0}, with the log link
 * {@code eta = log(mu)}.
 *
 * <p>The methods are pure and thread-safe. None checks its arguments: they are the inner loop of every fit, and what
 * enters is checked where a table becomes blocks.
 */
public sealed interface Family permits Poisson {

    /** Returns the Poisson distribution: variance equal to the mean. */
    static Family poisson() {
        return Poisson.INSTANCE;
    }

    /** Returns the name in words: "Poisson". */
    String name();

    /** Returns the variance {@code V(mu)}. */
    double variance(double mu);

    /** Returns the derivative of the log density by {@code eta}. */
    double score(double y, double mu);

    /** Returns the Fisher information of a count on {@code eta}: the variance of the score. */
    double information(double mu);

    /**
     * Returns the variance of the squared Pearson residual {@code (y - mu)² / V(mu)}, whose mean is 1: {@code 2 + 1/mu} for
     * Poisson counts.
     */
    double squaredResidualVariance(double mu);

    /** Returns the covariance of the squared Pearson residual with {@link #score}: 1 for Poisson counts. */
    double squaredResidualWithScore(double mu);

    /** Returns the logarithm of the probability of a count, complete with every normalising constant. */
    double logDensity(double y, double mu);

    /** Returns the unit deviance: twice the log density at {@code mu = y} less that at {@code mu}; at least 0. */
    double unitDeviance(double y, double mu);
}
