package countwright.fit;

import java.util.Arrays;

/**
 * What can be said of each column before the first step: how many rows have an entry in it, of which signs, with how many
 * events; and the totals of counts and exposure, from which the fit of a baseline alone follows.
 */
final class Survey implements Accumulator<Survey> {

    private static final int COUNT = 0;
    private static final int EXPOSURE = 1;

    private final long[] rows;
    private final double[] events;
    private final boolean[] positive;
    private final boolean[] negative;
    private final double[] least;
    private final double[] greatest;
    private long rowCount;
    private final TwofoldSums totals = new TwofoldSums(2);

    Survey(int columnCount) {
        this.rows = new long[columnCount];
        this.events = new double[columnCount];
        this.positive = new boolean[columnCount];
        this.negative = new boolean[columnCount];
        this.least = new double[columnCount];
        this.greatest = new double[columnCount];
        Arrays.fill(least, Double.POSITIVE_INFINITY);
        Arrays.fill(greatest, Double.NEGATIVE_INFINITY);
    }

    @Override
    public void add(Block block) {
        double[] response = block.response();
        for (Strip strip : block.strips()) {
            int[] columns = strip.columns();
            double[] values = strip.values();
            for (int row = 0; row < block.size(); row++) {
                int column = columns[row];
                double value = values[row];
                if (column == Strip.NONE || value == 0) {
                    continue;
                }
                rows[column]++;
                events[column] += response[row];
                positive[column] |= value > 0;
                negative[column] |= value < 0;
                least[column] = Math.min(least[column], value);
                greatest[column] = Math.max(greatest[column], value);
            }
        }
        rowCount += block.size();
        for (int row = 0; row < block.size(); row++) {
            totals.add(COUNT, response[row]);
            totals.add(EXPOSURE, Math.exp(block.offset()[row]));
        }
    }

    @Override
    public void merge(Survey later) {
        for (int column = 0; column < rows.length; column++) {
            rows[column] += later.rows[column];
            events[column] += later.events[column];
            positive[column] |= later.positive[column];
            negative[column] |= later.negative[column];
            least[column] = Math.min(least[column], later.least[column]);
            greatest[column] = Math.max(greatest[column], later.greatest[column]);
        }
        rowCount += later.rowCount;
        totals.merge(later.totals);
    }

    /** Returns whether a column can be estimated as far as its own rows tell. */
    ColumnState state(int column) {
        if (rows[column] == 0) {
            return ColumnState.EMPTY;
        }
        boolean oneSign = positive[column] != negative[column];
        return oneSign && events[column] == 0 ? ColumnState.UNBOUNDED : ColumnState.ESTIMATED;
    }

    /** Returns the largest absolute value in a column. */
    double largest(int column) {
        return rows[column] == 0 ? 0 : Math.max(Math.abs(least[column]), Math.abs(greatest[column]));
    }

    /** Returns how far apart the least and the greatest value in a column are; rows without an entry have 0. */
    double range(int column) {
        if (rows[column] == 0) {
            return 0;
        }
        return rows[column] == rowCount
                ? greatest[column] - least[column]
                : Math.max(0, greatest[column]) - Math.min(0, least[column]);
    }

    double totalCount() {
        return totals.value(COUNT);
    }

    /** Returns the sum of the exposures {@code exp(offset)}. */
    double totalExposure() {
        return totals.value(EXPOSURE);
    }
}
