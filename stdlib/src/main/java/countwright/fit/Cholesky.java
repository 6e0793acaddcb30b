package countwright.fit;

import java.util.Arrays;
import java.util.List;

/**
 * The factor {@code L} of a symmetric matrix {@code A = L L'}, in twice the precision of a double, over those columns that
 * earlier columns do not already determine.
 *
 * <p>Columns are taken in their order. The pivot of a column over its diagonal element is the share of the column that the
 * earlier columns leave unexplained ({@code 1 - R²}, weighted); where it is below the tolerance the column is passed over. So
 * the dropped one of a set of dependent columns is always the last, which is what a reader of the model expects, while
 * pivoting by size would drop whichever happens to be small. Rounding in the data leaves a share of about 1e-32, and an
 * honest polynomial of uncentred years about 1e-11; the tolerance of 1e-18 lies well between.
 *
 * <p>Normal equations square the condition number of the design; at 32 digits that leaves more than the 16 the data have, so
 * neither centring nor an orthogonal factor, which would need all rows, is called for. Source: N. J. Higham, <em>Accuracy
 * and Stability of Numerical Algorithms</em>, 2nd ed., 2002, chapter 10.
 */
final class Cholesky {

    private static final double TOLERANCE = 1e-18;

    private final int[] kept;
    private final TwofoldRows factor;

    private Cholesky(int[] kept, TwofoldRows factor) {
        this.kept = kept;
        this.factor = factor;
    }

    /** Factors the part of a packed lower triangle that belongs to the candidate columns, which ascend. */
    static Cholesky of(TwofoldSums triangle, List<Integer> candidates) {
        int[] kept = new int[candidates.size()];
        int rank = 0;
        TwofoldRows factor = new TwofoldRows(candidates.size());
        for (int column : candidates) {
            factor.start(rank, rank + 1);
            for (int k = 0; k < rank; k++) {
                Twofold rest = triangle.get(packed(column, kept[k])).minus(factor.dot(rank, factor, k, 0, k));
                factor.set(rank, k, rest.over(factor.get(k, k)));
            }
            Twofold diagonal = triangle.get(packed(column, column));
            Twofold pivot = diagonal.minus(factor.dot(rank, factor, rank, 0, rank));
            if (pivot.high() > TOLERANCE * diagonal.high()) {
                factor.set(rank, rank, pivot.root());
                kept[rank++] = column;
            }
        }
        return new Cholesky(Arrays.copyOf(kept, rank), factor);
    }

    /** Returns the position of row i, column j (j <= i) in a packed lower triangle. */
    static int packed(int i, int j) {
        return i * (i + 1) / 2 + j;
    }

    int rank() {
        return kept.length;
    }

    List<Integer> kept() {
        return Arrays.stream(kept).boxed().toList();
    }

    /** Returns the solution of {@code A x = b} in the columns kept, 0 in the others. */
    double[] solve(TwofoldSums b, int columnCount) {
        int n = kept.length;
        Twofold[] x = new Twofold[n];
        for (int i = 0; i < n; i++) {
            Twofold sum = b.get(kept[i]);
            for (int k = 0; k < i; k++) {
                sum = sum.minus(factor.get(i, k).times(x[k]));
            }
            x[i] = sum.over(factor.get(i, i));
        }
        for (int i = n - 1; i >= 0; i--) {
            Twofold sum = x[i];
            for (int k = i + 1; k < n; k++) {
                sum = sum.minus(factor.get(k, i).times(x[k]));
            }
            x[i] = sum.over(factor.get(i, i));
        }
        double[] solution = new double[columnCount];
        for (int i = 0; i < n; i++) {
            solution[kept[i]] = x[i].value();
        }
        return solution;
    }

    /** Returns the inverse of the kept part, in its place in a packed lower triangle over all columns. */
    TwofoldTriangle inverse(int columnCount) {
        TwofoldRows inverse = inverseOfFactor();
        int n = kept.length;
        TwofoldTriangle product = new TwofoldTriangle(columnCount);
        for (int i = 0; i < n; i++) {
            for (int j = 0; j <= i; j++) {
                product.set(kept[i], kept[j], inverse.dot(i, inverse, j, i, n));
            }
        }
        return product;
    }

    /** Returns the inverse of L, transposed, so that both its making and its use run along rows. */
    private TwofoldRows inverseOfFactor() {
        int n = kept.length;
        Twofold one = new Twofold(1, 0);
        TwofoldRows inverse = new TwofoldRows(n);
        for (int j = 0; j < n; j++) {
            inverse.start(j, n);
            inverse.set(j, j, one.over(factor.get(j, j)));
            for (int i = j + 1; i < n; i++) {
                Twofold sum = factor.dot(i, inverse, j, j, i);
                inverse.set(j, i, Twofold.ZERO.minus(sum).over(factor.get(i, i)));
            }
        }
        return inverse;
    }
}
