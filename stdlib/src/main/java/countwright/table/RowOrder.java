package countwright.table;

import java.time.LocalDateTime;
import java.time.temporal.ChronoUnit;
import java.util.Arrays;

/**
 * The rows of a column in order; missing values come last, equal values keep their order.
 *
 * <p>Each value becomes a whole number that sorts as it does. These are sorted bare, and each row then finds its place
 * among them by bisection: for a million rows that takes a tenth of the time of sorting boxed row numbers.
 */
final class RowOrder {

    private static final long MISSING = Long.MAX_VALUE;

    private static final LocalDateTime EPOCH = LocalDateTime.of(1970, 1, 1, 0, 0);

    private RowOrder() {}

    static int[] ascending(Column column) {
        return sorted(keys(column));
    }

    static int[] descending(Column column) {
        long[] keys = keys(column);
        for (int row = 0; row < keys.length; row++) {
            keys[row] = keys[row] == MISSING ? MISSING : ~keys[row];
        }
        return sorted(keys);
    }

    /** Returns how many different values there are, missing ones aside. */
    static long distinct(Column column) {
        return Arrays.stream(keys(column))
                .filter(key -> key != MISSING)
                .distinct()
                .count();
    }

    private static int[] sorted(long[] keys) {
        long[] inOrder = keys.clone();
        Arrays.parallelSort(inOrder);
        int[] firstPlaces = new int[inOrder.length];
        long[] distinct = new long[inOrder.length];
        int count = 0;
        for (int place = 0; place < inOrder.length; place++) {
            if (place == 0 || inOrder[place] != inOrder[place - 1]) {
                firstPlaces[count] = place;
                distinct[count++] = inOrder[place];
            }
        }
        int[] rows = new int[keys.length];
        for (int row = 0; row < keys.length; row++) {
            rows[firstPlaces[Arrays.binarySearch(distinct, 0, count, keys[row])]++] = row;
        }
        return rows;
    }

    private static long[] keys(Column column) {
        long[] keys = new long[column.size()];
        for (int row = 0; row < keys.length; row++) {
            keys[row] = column.isMissing(row) ? MISSING : key(column, row);
        }
        return keys;
    }

    private static long key(Column column, int row) {
        if (column instanceof NumberColumn numbers) {
            // The bits of a double sort as the number does, but for the negative ones, which sort backwards.
            long bits = Double.doubleToLongBits(numbers.value(row) + 0.0);
            return bits >= 0 ? bits : bits ^ Long.MAX_VALUE;
        }
        if (column instanceof TextColumn texts) {
            return texts.code(row);
        }
        if (column instanceof DateColumn dates) {
            return dates.epochDay(row);
        }
        LocalDateTime moment = ((DateTimeColumn) column).moment(row).orElseThrow();
        return ChronoUnit.MICROS.between(EPOCH, moment);
    }
}
