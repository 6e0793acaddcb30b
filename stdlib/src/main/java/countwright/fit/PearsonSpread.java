package countwright.fit;

import countwright.family.Family;

/**
 * How much the Pearson chi-square varies where the model holds.
 *
 * <p>The usual {@code sqrt(2 df)} is for counts that are not small. A row with a small mean adds {@code 1/mu} to the variance
 * of its squared residual, and part of that is taken up by the coefficients being estimated from the same counts. With
 * {@code v} the variance of a row's squared residual {@code r²}, {@code c = sum x cov(r², score)} and {@code I} the
 * information, the variance of the sum given the estimates is, to first order, {@code sum v - c' I^-1 c}; times
 * {@code df / n}, it is exactly {@code 2 df} for Poisson counts of equal means. Source: P. McCullagh, <em>On the Asymptotic
 * Distribution of Pearson's Statistic in Linear Exponential-Family Models</em>, International Statistical Review 53, 1985.
 */
final class PearsonSpread implements Accumulator<PearsonSpread> {

    private final Family family;
    private final LinearPredictor predictor;
    private final TwofoldSums variance = new TwofoldSums(1);
    private final TwofoldSums withScore;
    private long rows;

    PearsonSpread(Family family, LinearPredictor predictor, int columnCount) {
        this.family = family;
        this.predictor = predictor;
        this.withScore = new TwofoldSums(columnCount);
    }

    @Override
    public void add(Block block) {
        predictor.over(block);
        for (int row = 0; row < block.size(); row++) {
            if (predictor.vanishes(row)) {
                continue;
            }
            rows++;
            double mu = predictor.mean(row);
            if (mu == 0) {
                continue;
            }
            variance.add(0, family.squaredResidualVariance(mu));
            double covariance = family.squaredResidualWithScore(mu);
            for (Strip strip : block.strips()) {
                int column = strip.columns()[row];
                if (column != Strip.NONE) {
                    withScore.addProduct(column, covariance, strip.values()[row]);
                }
            }
        }
    }

    @Override
    public void merge(PearsonSpread later) {
        variance.merge(later.variance);
        withScore.merge(later.withScore);
        rows += later.rows;
    }

    /** Returns the standard deviation, given the covariance of the coefficients estimated, which stand in some columns. */
    double value(TwofoldTriangle covariance, int[] estimated) {
        double[] entries = new double[estimated.length];
        for (int i = 0; i < entries.length; i++) {
            entries[i] = withScore.value(estimated[i]);
        }
        double left = variance.value(0) - covariance.quadraticForm(estimated, entries, entries.length);
        double degreesOfFreedom = rows - (double) estimated.length;
        return degreesOfFreedom <= 0 ? 0 : Math.sqrt(Math.max(0, left) * degreesOfFreedom / rows);
    }
}
