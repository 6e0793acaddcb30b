package countwright.fit;

/**
 * A part of the design in which a row has at most one entry that is not zero: the baseline, a linear column, a factor, an
 * interaction of those. A factor with 100,000 levels is one strip, and a row of it one column number.
 *
 * <p>A strip is a buffer that a {@link RowSource} fills again for each block; whoever folds reads it and keeps nothing of
 * it.
 */
public final class Strip {

    /** The column number of a row without an entry, such as a row at the reference level. */
    public static final int NONE = -1;

    private final int[] columns;
    private final double[] values;

    /** Makes a strip for blocks of up to {@code capacity} rows. */
    public Strip(int capacity) {
        this.columns = new int[capacity];
        this.values = new double[capacity];
    }

    /** Returns, for each row of the block, the column of the design it has an entry in, or {@link #NONE}; not a copy. */
    public int[] columns() {
        return columns;
    }

    /** Returns the entry of each row; not a copy. */
    public double[] values() {
        return values;
    }
}
