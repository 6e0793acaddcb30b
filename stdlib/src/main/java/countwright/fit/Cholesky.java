package countwright.fit;

import java.util.ArrayList;
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
    private final Twofold[][] factor;

    private Cholesky(int[] kept, Twofold[][] factor) {
        this.kept = kept;
        this.factor = factor;
    }

    /** Factors the part of a packed lower triangle that belongs to the candidate columns, which ascend. */
    static Cholesky of(TwofoldSums triangle, List<Integer> candidates) {
        List<Integer> kept = new ArrayList<>();
        Twofold[][] rows = new Twofold[candidates.size()][];
        for (int column : candidates) {
            int size = kept.size();
            Twofold[] row = new Twofold[size + 1];
            Twofold diagonal = triangle.get(packed(column, column));
            Twofold pivot = diagonal;
            for (int k = 0; k < size; k++) {
                Twofold sum = triangle.get(packed(column, kept.get(k)));
                for (int m = 0; m < k; m++) {
                    sum = sum.minus(row[m].times(rows[k][m]));
                }
                row[k] = sum.over(rows[k][k]);
                pivot = pivot.minus(row[k].times(row[k]));
            }
            if (pivot.high() > TOLERANCE * diagonal.high()) {
                row[size] = pivot.root();
                rows[size] = row;
                kept.add(column);
            }
        }
        return new Cholesky(kept.stream().mapToInt(Integer::intValue).toArray(), rows);
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
                sum = sum.minus(factor[i][k].times(x[k]));
            }
            x[i] = sum.over(factor[i][i]);
        }
        for (int i = n - 1; i >= 0; i--) {
            Twofold sum = x[i];
            for (int k = i + 1; k < n; k++) {
                sum = sum.minus(factor[k][i].times(x[k]));
            }
            x[i] = sum.over(factor[i][i]);
        }
        double[] solution = new double[columnCount];
        for (int i = 0; i < n; i++) {
            solution[kept[i]] = x[i].value();
        }
        return solution;
    }

    /** Returns the inverse of the kept part, in its place in a packed lower triangle over all columns. */
    TwofoldTriangle inverse(int columnCount) {
        int n = kept.length;
        Twofold[][] inverse = new Twofold[n][];
        for (int i = 0; i < n; i++) {
            inverse[i] = new Twofold[i + 1];
            Twofold one = new Twofold(1, 0);
            inverse[i][i] = one.over(factor[i][i]);
            for (int j = 0; j < i; j++) {
                Twofold sum = Twofold.ZERO;
                for (int k = j; k < i; k++) {
                    sum = sum.minus(factor[i][k].times(inverse[k][j]));
                }
                inverse[i][j] = sum.over(factor[i][i]);
            }
        }
        TwofoldTriangle product = new TwofoldTriangle(columnCount);
        for (int i = 0; i < n; i++) {
            for (int j = 0; j <= i; j++) {
                Twofold sum = Twofold.ZERO;
                for (int k = i; k < n; k++) {
                    sum = sum.plus(inverse[k][i].times(inverse[k][j]));
                }
                product.set(kept[i], kept[j], sum);
            }
        }
        return product;
    }
}
