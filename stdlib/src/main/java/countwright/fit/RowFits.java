package countwright.fit;

import java.util.List;

/**
 * What a fit says of each row of a source, computed on request: the mean, and the variance of the linear predictor. Works for
 * the rows that were fitted and for any others coded by the same design.
 */
public final class RowFits {

    private final double[] means;
    private final double[] variances;
    private final boolean[] doubtful;

    private RowFits(int rowCount) {
        this.means = new double[rowCount];
        this.variances = new double[rowCount];
        this.doubtful = new boolean[rowCount];
    }

    /** Returns the fits of all rows of a source. */
    public static RowFits of(RowSource source, Estimate estimate) {
        RowFits fits = new RowFits(source.rowCount());
        source.fold(() -> new Pass(fits, estimate));
        return fits;
    }

    /** Returns the number of rows. */
    public int size() {
        return means.length;
    }

    /** Returns the mean of a row; 0 where the row has an entry in an unbounded column. */
    public double mean(int row) {
        return means[row];
    }

    /**
     * Returns the variance of the linear predictor of a row, {@code x' C x} with the covariance {@code C} of the
     * coefficients; infinite where the row has an entry in an unbounded column.
     */
    public double variance(int row) {
        return variances[row];
    }

    /** Returns whether a row has an entry in a column that was empty or aliased in the fit. */
    public boolean isDoubtful(int row) {
        return doubtful[row];
    }

    private static final class Pass implements Accumulator<Pass> {

        private final RowFits target;
        private final Estimate estimate;
        private final LinearPredictor predictor;

        Pass(RowFits target, Estimate estimate) {
            this.target = target;
            this.estimate = estimate;
            this.predictor = estimate.predictor();
        }

        @Override
        public void add(Block block) {
            predictor.over(block);
            List<Strip> strips = block.strips();
            int[] columns = new int[strips.size()];
            double[] entries = new double[strips.size()];
            for (int row = 0; row < block.size(); row++) {
                int at = block.firstRow() + row;
                int count = 0;
                for (Strip strip : strips) {
                    int column = strip.columns()[row];
                    double value = strip.values()[row];
                    if (column == Strip.NONE || value == 0) {
                        continue;
                    }
                    ColumnState state = estimate.state(column);
                    if (state == ColumnState.ESTIMATED) {
                        columns[count] = column;
                        entries[count++] = value;
                    } else if (state != ColumnState.UNBOUNDED) {
                        target.doubtful[at] = true;
                    }
                }
                target.means[at] = predictor.mean(row);
                target.variances[at] = predictor.vanishes(row)
                        ? Double.POSITIVE_INFINITY
                        : Math.max(0, estimate.quadraticForm(columns, entries, count));
            }
        }

        @Override
        public void merge(Pass later) {
            // Each pass writes to its own rows of the target; nothing is left to merge.
        }
    }
}
