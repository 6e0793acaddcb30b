package countwright.fit;

import countwright.family.Family;
import java.util.function.Supplier;

/**
 * One pass at given coefficients: log-likelihood, deviance, Pearson chi-square, score and Fisher information, all in sums of
 * twice the precision. A row costs a number of operations that grows with the square of its strips, not of its columns.
 */
final class LikelihoodPass implements Accumulator<LikelihoodPass> {

    private static final int LOG_LIKELIHOOD = 0;
    private static final int DEVIANCE = 1;
    private static final int PEARSON = 2;

    private final Family family;
    private final LinearPredictor predictor;
    private final TwofoldSums totals = new TwofoldSums(3);
    private final TwofoldSums score;
    private final TwofoldSums information;
    private int[] columns = new int[0];
    private double[] entries = new double[0];
    private long informativeRows;

    private LikelihoodPass(Family family, double[] coefficients, boolean[] unbounded) {
        this.family = family;
        this.predictor = new LinearPredictor(coefficients, unbounded);
        this.score = new TwofoldSums(coefficients.length);
        this.information = new TwofoldSums(coefficients.length * (coefficients.length + 1) / 2);
    }

    static Supplier<LikelihoodPass> at(double[] coefficients, boolean[] unbounded, Family family) {
        return () -> new LikelihoodPass(family, coefficients, unbounded);
    }

    @Override
    public void add(Block block) {
        predictor.over(block);
        if (columns.length != block.strips().size()) {
            columns = new int[block.strips().size()];
            entries = new double[columns.length];
        }
        double[] response = block.response();
        for (int row = 0; row < block.size(); row++) {
            if (predictor.vanishes(row)) {
                continue;
            }
            informativeRows++;
            double y = response[row];
            double mu = predictor.mean(row);
            totals.add(LOG_LIKELIHOOD, family.logDensity(y, mu));
            totals.add(DEVIANCE, family.unitDeviance(y, mu));
            // A mean that underflows to 0 where there is no event, on the way to no finite maximum, adds nothing.
            double difference = y - mu;
            totals.add(PEARSON, difference == 0 ? 0 : difference * difference / family.variance(mu));
            addDerivatives(gather(block, row), family.score(y, mu), family.information(mu));
        }
    }

    @Override
    public void merge(LikelihoodPass later) {
        totals.merge(later.totals);
        score.merge(later.score);
        information.merge(later.information);
        informativeRows += later.informativeRows;
    }

    double logLikelihood() {
        return totals.value(LOG_LIKELIHOOD);
    }

    double deviance() {
        return totals.value(DEVIANCE);
    }

    double pearsonChiSquare() {
        return totals.value(PEARSON);
    }

    TwofoldSums score() {
        return score;
    }

    TwofoldSums information() {
        return information;
    }

    /** Returns the number of rows whose mean is not determined to be 0. */
    long informativeRows() {
        return informativeRows;
    }

    private int gather(Block block, int row) {
        int count = 0;
        for (Strip strip : block.strips()) {
            int column = strip.columns()[row];
            if (column != Strip.NONE) {
                columns[count] = column;
                entries[count++] = strip.values()[row];
            }
        }
        return count;
    }

    private void addDerivatives(int count, double rowScore, double weight) {
        for (int a = 0; a < count; a++) {
            score.addProduct(columns[a], rowScore, entries[a]);
            double weighted = weight * entries[a];
            double weightedError = Math.fma(weight, entries[a], -weighted);
            for (int b = 0; b <= a; b++) {
                int at = columns[a] >= columns[b]
                        ? Cholesky.packed(columns[a], columns[b])
                        : Cholesky.packed(columns[b], columns[a]);
                information.addProduct(at, weighted, entries[b]);
                information.addLow(at, weightedError * entries[b]);
            }
        }
    }
}
