package countwright.table;

import java.util.Arrays;
import java.util.Comparator;

/** The rows of a column in ascending order; missing values come last, equal values keep their order. */
final class RowOrder {

    private RowOrder() {}

    static int[] ascending(Column column) {
        return sorted(column, comparison(column));
    }

    static int[] descending(Column column) {
        return sorted(column, comparison(column).reversed());
    }

    private static int[] sorted(Column column, Comparator<Integer> comparison) {
        Integer[] rows = new Integer[column.size()];
        Arrays.setAll(rows, row -> row);
        Arrays.sort(
                rows, Comparator.<Integer, Boolean>comparing(column::isMissing).thenComparing(comparison));
        return Arrays.stream(rows).mapToInt(Integer::intValue).toArray();
    }

    private static Comparator<Integer> comparison(Column column) {
        if (column instanceof NumberColumn numbers) {
            return Comparator.comparingDouble(numbers::value);
        }
        if (column instanceof TextColumn texts) {
            return Comparator.comparingInt(texts::code);
        }
        // Dates and date-times are written so that the order of the texts is the order of time; those before the year 0
        // or after 9999 are not, and do not occur in counts.
        return Comparator.comparing(column::text);
    }
}
