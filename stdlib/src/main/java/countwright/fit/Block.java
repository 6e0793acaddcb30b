package countwright.fit;

import java.util.ArrayList;
import java.util.List;

/**
 * A few thousand consecutive rows, held by column: the counts, the offsets on the log scale and the strips of the design.
 * Column 0 of the design is the baseline, 1 in every row.
 *
 * <p>A block is a buffer that a {@link RowSource} fills again and again; whoever folds reads it and keeps nothing of it.
 */
public final class Block {

    /** The number of rows a block holds at most. */
    public static final int CAPACITY = 4096;

    private final double[] response = new double[CAPACITY];
    private final double[] offset = new double[CAPACITY];
    private final List<Strip> strips;
    private int firstRow;
    private int size;

    /** Makes an empty block with room for a number of strips. */
    public Block(int stripCount) {
        List<Strip> made = new ArrayList<>();
        for (int i = 0; i < stripCount; i++) {
            made.add(new Strip(CAPACITY));
        }
        this.strips = List.copyOf(made);
    }

    /** Says which rows the block is about to hold; the caller then fills every array. */
    public void place(int newFirstRow, int newSize) {
        this.firstRow = newFirstRow;
        this.size = newSize;
    }

    /** Returns the position of the first row in its source, counted from 0. */
    public int firstRow() {
        return firstRow;
    }

    /** Returns the number of rows, at most {@link #CAPACITY}; arrays beyond it hold leftovers. */
    public int size() {
        return size;
    }

    /** Returns the counts, whole numbers of at least 0; not a copy. */
    public double[] response() {
        return response;
    }

    /** Returns the offsets, the part of the linear predictor without a coefficient; not a copy. */
    public double[] offset() {
        return offset;
    }

    /** Returns the strips of the design. */
    public List<Strip> strips() {
        return strips;
    }
}
