package countwright.fit;

/** Rows of numbers in twice the precision of a double, held apart as high and low parts so that dot products run fast. */
final class TwofoldRows {

    private final double[][] high;
    private final double[][] low;

    /** Makes room for a number of rows; each is given its length before it is used. */
    TwofoldRows(int count) {
        this.high = new double[count][];
        this.low = new double[count][];
    }

    /** Makes a row of zeros. */
    void start(int row, int length) {
        high[row] = new double[length];
        low[row] = new double[length];
    }

    Twofold get(int row, int at) {
        return new Twofold(high[row][at], low[row][at]);
    }

    void set(int row, int at, Twofold value) {
        high[row][at] = value.high();
        low[row][at] = value.low();
    }

    /** Returns the sum of the products of two rows from one position up to, and without, another. */
    Twofold dot(int row, TwofoldRows other, int otherRow, int from, int to) {
        double[] ah = high[row];
        double[] al = low[row];
        double[] bh = other.high[otherRow];
        double[] bl = other.low[otherRow];
        double sum = 0;
        double rest = 0;
        for (int k = from; k < to; k++) {
            double p = ah[k] * bh[k];
            double error = Math.fma(ah[k], bh[k], -p) + (ah[k] * bl[k] + al[k] * bh[k]);
            double s = sum + p;
            double t = s - sum;
            rest += (sum - (s - t)) + (p - t) + error;
            sum = s;
        }
        return Twofold.sum(sum, rest);
    }
}
