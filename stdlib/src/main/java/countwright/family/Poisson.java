package countwright.family;

/**
 * The Poisson distribution, with densities and deviances that keep their digits for counts of any size.
 *
 * <p>With {@code D(y, mu) = y log(y/mu) - (y - mu)}, computed without cancellation, the unit deviance is {@code 2 D} and
 *
 * <pre>log p(y; mu) = -D(y, mu) - log(2 pi y)/2 - S(y),   S(y) = log(y!) - log(sqrt(2 pi y) (y/e)^y)</pre>
 *
 * where {@code S} is the error of Stirling's formula. Adding up {@code y log mu - mu - log y!} instead loses as many digits
 * as the counts have. Source: C. Loader, <em>Fast and Accurate Computation of Binomial Probabilities</em>, 2000.
 * Absolute accuracy of {@link #logDensity} about 2e-15 times the larger of 1 and its value.
 */
final class Poisson implements Family {

    static final Poisson INSTANCE = new Poisson();

    private static final double HALF_LOG_TWO_PI = 0.9189385332046728;

    /** Below this relative difference of y and mu the logarithm is replaced by its series. */
    private static final double SERIES_RANGE = 0.1;

    private static final int TABLE_SIZE = 16;
    private static final double[] STIRLING_ERROR = stirlingErrors();

    private Poisson() {}

    @Override
    public String name() {
        return "Poisson";
    }

    @Override
    public double variance(double mu) {
        return mu;
    }

    @Override
    public double score(double y, double mu) {
        return y - mu;
    }

    @Override
    public double information(double mu) {
        return mu;
    }

    @Override
    public double squaredResidualVariance(double mu) {
        return 2 + 1 / mu;
    }

    @Override
    public double squaredResidualWithScore(double mu) {
        return 1;
    }

    @Override
    public double logDensity(double y, double mu) {
        if (y == 0) {
            return -mu;
        }
        return -divergence(y, mu) - HALF_LOG_TWO_PI - 0.5 * Math.log(y) - stirlingError(y);
    }

    @Override
    public double unitDeviance(double y, double mu) {
        return 2 * divergence(y, mu);
    }

    /** Returns {@code y log(y/mu) - (y - mu)}. */
    private static double divergence(double y, double mu) {
        if (y == 0) {
            return mu;
        }
        double difference = y - mu;
        double v = difference / (y + mu);
        if (!(Math.abs(v) < SERIES_RANGE)) {
            return y * Math.log(y / mu) - difference;
        }
        // log(y/mu) = 2 artanh(v) = 2 (v + v^3/3 + v^5/5 + …), and y 2v - (y - mu) = (y - mu) v.
        double sum = difference * v;
        double power = 2 * y * v;
        double square = v * v;
        for (int odd = 3; ; odd += 2) {
            power *= square;
            double next = sum + power / odd;
            if (next == sum) {
                return next;
            }
            sum = next;
        }
    }

    private static double stirlingError(double y) {
        if (y < TABLE_SIZE) {
            return STIRLING_ERROR[(int) y];
        }
        double q = 1 / (y * y);
        return (1.0 / 12 - (1.0 / 360 - (1.0 / 1260 - (1.0 / 1680 - 1.0 / 1188 * q) * q) * q) * q) / y;
    }

    private static double[] stirlingErrors() {
        double[] errors = new double[TABLE_SIZE];
        double factorial = 1;
        for (int n = 1; n < TABLE_SIZE; n++) {
            factorial *= n;
            errors[n] = Math.log(factorial) - HALF_LOG_TWO_PI - (n + 0.5) * Math.log(n) + n;
        }
        return errors;
    }
}
