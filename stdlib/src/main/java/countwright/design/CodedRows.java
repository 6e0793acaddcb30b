package countwright.design;

import countwright.fit.Accumulator;
import countwright.fit.Block;
import countwright.fit.MergeTree;
import countwright.fit.RowSource;
import countwright.fit.Strip;
import java.util.List;
import java.util.function.IntToDoubleFunction;
import java.util.function.Supplier;

/** The rows of a table in memory, coded by a design as they are gone over. */
final class CodedRows implements RowSource {

    /** Blocks in a segment. The cut is by position only, so that results do not depend on who does the work. */
    private static final int SEGMENT_BLOCKS = 16;

    /** An effect and the first of its columns in the design. */
    record Run(int firstColumn, Effect.Reader reader) {}

    private final int rowCount;
    private final int columnCount;
    private final List<Run> runs;
    private final IntToDoubleFunction response;
    private final IntToDoubleFunction offset;

    CodedRows(int rowCount, int columnCount, List<Run> runs, IntToDoubleFunction response, IntToDoubleFunction offset) {
        this.rowCount = rowCount;
        this.columnCount = columnCount;
        this.runs = List.copyOf(runs);
        this.response = response;
        this.offset = offset;
    }

    @Override
    public int rowCount() {
        return rowCount;
    }

    @Override
    public int columnCount() {
        return columnCount;
    }

    @Override
    public <A extends Accumulator<A>> A fold(Supplier<A> fresh) {
        MergeTree<A> tree = new MergeTree<>();
        Block block = new Block(runs.size());
        long segmentRows = (long) SEGMENT_BLOCKS * Block.CAPACITY;
        for (long start = 0; start < rowCount; start += segmentRows) {
            long end = Math.min(rowCount, start + segmentRows);
            A segment = fresh.get();
            for (long first = start; first < end; first += Block.CAPACITY) {
                fill(block, (int) first, (int) Math.min(Block.CAPACITY, end - first));
                segment.add(block);
            }
            tree.push(segment);
        }
        return tree.result(fresh);
    }

    private void fill(Block block, int firstRow, int size) {
        block.place(firstRow, size);
        for (int i = 0; i < size; i++) {
            block.response()[i] = response.applyAsDouble(firstRow + i);
            block.offset()[i] = offset.applyAsDouble(firstRow + i);
        }
        for (int r = 0; r < runs.size(); r++) {
            fill(block.strips().get(r), runs.get(r), firstRow, size);
        }
    }

    private static void fill(Strip strip, Run run, int firstRow, int size) {
        int[] columns = strip.columns();
        double[] values = strip.values();
        Effect.Reader reader = run.reader();
        for (int i = 0; i < size; i++) {
            int index = reader.index(firstRow + i);
            columns[i] = index < 0 ? Strip.NONE : run.firstColumn() + index;
            values[i] = index < 0 ? 0 : reader.value(firstRow + i);
        }
    }
}
