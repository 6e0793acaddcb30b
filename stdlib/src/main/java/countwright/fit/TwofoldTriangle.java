package countwright.fit;

/** A symmetric matrix in twice the precision of a double, held as its lower triangle. */
final class TwofoldTriangle {

    private final double[] high;
    private final double[] low;

    TwofoldTriangle(int size) {
        this.high = new double[size * (size + 1) / 2];
        this.low = new double[high.length];
    }

    void set(int i, int j, Twofold value) {
        int at = Cholesky.packed(Math.max(i, j), Math.min(i, j));
        high[at] = value.high();
        low[at] = value.low();
    }

    double value(int i, int j) {
        return high[Cholesky.packed(Math.max(i, j), Math.min(i, j))];
    }

    /**
     * Returns {@code x' A x} for a row with few entries. Where columns have large means the terms cancel; in twice the
     * precision the result keeps its digits.
     */
    double quadraticForm(int[] columns, double[] entries, int count) {
        double sum = 0;
        double rest = 0;
        for (int a = 0; a < count; a++) {
            for (int b = 0; b <= a; b++) {
                int at = Cholesky.packed(Math.max(columns[a], columns[b]), Math.min(columns[a], columns[b]));
                double factor = a == b ? 1 : 2;
                double q = entries[a] * entries[b];
                double qError = Math.fma(entries[a], entries[b], -q);
                double p = factor * q * high[at];
                double pError = Math.fma(factor * q, high[at], -p);
                double s = sum + p;
                double t = s - sum;
                rest += (sum - (s - t)) + (p - t) + pError + factor * (q * low[at] + qError * high[at]);
                sum = s;
            }
        }
        return sum + rest;
    }
}
