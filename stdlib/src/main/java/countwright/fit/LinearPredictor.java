package countwright.fit;

import java.util.Arrays;

/** The linear predictor and the mean of each row of a block, in a buffer that is used again for the next block. */
final class LinearPredictor {

    private final double[] coefficients;
    private final boolean[] unbounded;
    private final double[] eta = new double[Block.CAPACITY];
    private final double[] rest = new double[Block.CAPACITY];

    /**
     * Makes a predictor; a row with an entry in a column marked unbounded has the mean 0. Keeps the arrays.
     *
     * @param coefficients one for each column of the design
     * @param unbounded which columns have no finite estimate
     */
    LinearPredictor(double[] coefficients, boolean[] unbounded) {
        this.coefficients = coefficients;
        this.unbounded = unbounded;
    }

    /** Computes the predictor of each row as an exact sum rounded once: a mean of 1e9 then still has all its digits. */
    void over(Block block) {
        int size = block.size();
        System.arraycopy(block.offset(), 0, eta, 0, size);
        Arrays.fill(rest, 0, size, 0);
        for (Strip strip : block.strips()) {
            int[] columns = strip.columns();
            double[] values = strip.values();
            for (int row = 0; row < size; row++) {
                int column = columns[row];
                if (column == Strip.NONE || values[row] == 0) {
                    continue;
                }
                if (unbounded[column]) {
                    eta[row] = Double.NEGATIVE_INFINITY;
                    continue;
                }
                add(row, coefficients[column], values[row]);
            }
        }
    }

    /** Returns whether the mean of a row is determined to be 0. */
    boolean vanishes(int row) {
        return eta[row] == Double.NEGATIVE_INFINITY;
    }

    /** Returns the mean of a row. */
    double mean(int row) {
        return vanishes(row) ? 0 : Math.exp(eta[row]) * (1 + rest[row]);
    }

    /** Returns the linear predictor of a row. */
    double eta(int row) {
        return vanishes(row) ? Double.NEGATIVE_INFINITY : eta[row] + rest[row];
    }

    private void add(int row, double coefficient, double value) {
        double before = eta[row];
        if (before == Double.NEGATIVE_INFINITY) {
            return;
        }
        double p = coefficient * value;
        double error = Math.fma(coefficient, value, -p);
        double s = before + p;
        double t = s - before;
        eta[row] = s;
        rest[row] += (before - (s - t)) + (p - t) + error;
    }
}
