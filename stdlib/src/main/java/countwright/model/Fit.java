package countwright.model;

import countwright.design.Design;
import countwright.fit.ColumnState;
import countwright.fit.Estimate;
import countwright.fit.RowFits;
import countwright.fit.RowSource;
import countwright.table.Table;
import java.util.Optional;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;

/** What a fit is made of, shared by the views of it that differ in their confidence level. */
final class Fit {

    private static final double MEANINGLESS = 20;

    private final CountModel spec;
    private final Table table;
    private final Design design;
    private final RowSource rows;
    private final Estimate estimate;
    private final Optional<String> leftOut;
    private volatile @Nullable RowFits rowFits;

    Fit(CountModel spec, Table table, Design design, RowSource rows, Estimate estimate, Optional<String> leftOut) {
        this.spec = spec;
        this.table = table;
        this.design = design;
        this.rows = rows;
        this.estimate = estimate;
        this.leftOut = leftOut;
    }

    CountModel spec() {
        return spec;
    }

    Table table() {
        return table;
    }

    Design design() {
        return design;
    }

    Estimate estimate() {
        return estimate;
    }

    Optional<String> leftOut() {
        return leftOut;
    }

    /** Returns the means and variances by row, computed at the first call; a race computes them twice, to no harm. */
    RowFits rowFits() {
        RowFits known = rowFits;
        if (known == null) {
            known = RowFits.of(rows, estimate);
            rowFits = known;
        }
        return known;
    }

    /** Returns the columns of the design that have an estimate, in order. */
    int[] estimated() {
        return IntStream.range(0, estimate.columnCount())
                .filter(column -> estimate.state(column) == ColumnState.ESTIMATED)
                .toArray();
    }

    /** Returns the number of columns without a finite estimate. */
    int unboundedCount() {
        return (int) IntStream.range(0, estimate.columnCount())
                .filter(column -> estimate.state(column) == ColumnState.UNBOUNDED)
                .count();
    }

    /**
     * Returns whether the rows say nothing of a coefficient, as when two terms are all but the same: over the range of its
     * column, the interval for the rate ratio would span over 30 powers of ten. The size of the standard error alone would
     * not do; it is large for any covariate in a large unit.
     */
    boolean isUndetermined(int column) {
        return column > 0
                && estimate.state(column) == ColumnState.ESTIMATED
                && standardError(column) * estimate.range(column) > MEANINGLESS;
    }

    double standardError(int column) {
        return Math.sqrt(estimate.covariance(column, column));
    }
}
