package countwright.fit;

/**
 * An array of sums, each held as two doubles: what was added is added up as if in twice the precision and rounded once.
 * Source: T. Ogita, S. M. Rump and S. Oishi, <em>Accurate Sum and Dot Product</em>, SIAM Journal on Scientific Computing 26,
 * 2005, algorithms 4.4 and 5.3.
 */
final class TwofoldSums {

    private final double[] high;
    private final double[] low;

    TwofoldSums(int size) {
        this.high = new double[size];
        this.low = new double[size];
    }

    void add(int index, double term) {
        double before = high[index];
        double s = before + term;
        double t = s - before;
        high[index] = s;
        low[index] += (before - (s - t)) + (term - t);
    }

    void addProduct(int index, double a, double b) {
        double p = a * b;
        double error = Math.fma(a, b, -p);
        double before = high[index];
        double s = before + p;
        double t = s - before;
        high[index] = s;
        low[index] += (before - (s - t)) + (p - t) + error;
    }

    /** Adds a small term, of the size of a rounding error. */
    void addLow(int index, double term) {
        low[index] += term;
    }

    void merge(TwofoldSums other) {
        for (int i = 0; i < high.length; i++) {
            add(i, other.high[i]);
            low[i] += other.low[i];
        }
    }

    double value(int index) {
        return high[index] + low[index];
    }

    Twofold get(int index) {
        return Twofold.sum(high[index], low[index]);
    }
}
