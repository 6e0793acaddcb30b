package countwright.fit;

import java.util.function.Supplier;

/**
 * Rows that can be gone over as often as an estimator asks, in blocks. The estimators do not know whether they come from
 * memory, a file or a cluster.
 *
 * <p>A source cuts its rows into segments by position, gathers each segment in an accumulator of its own and merges them
 * with a {@link MergeTree}, so that the same rows give the same bits however the work is shared out.
 */
public interface RowSource {

    /** Returns the number of rows. */
    int rowCount();

    /** Returns the number of columns of the design, the baseline included. */
    int columnCount();

    /** Goes over all rows once and returns what was gathered. */
    <A extends Accumulator<A>> A fold(Supplier<A> fresh);
}
