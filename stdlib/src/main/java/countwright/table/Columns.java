package countwright.table;

import java.time.LocalDate;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Columns written out by hand, for small tables such as the scenarios to predict for:
 *
 * <pre>{@code
 * Table.of(texts("depot", "Harbour", "Quayside"), numbers("age", 5, 10))
 * }</pre>
 */
public final class Columns {

    private Columns() {}

    /** Returns a column of numbers; NaN marks a missing value. */
    public static NumberColumn numbers(String name, double... values) {
        return NumberColumn.of(name, values);
    }

    /** Returns a column of texts; null marks a missing value. */
    public static TextColumn texts(String name, @Nullable String... values) {
        return TextColumn.of(name, values);
    }

    /** Returns a column of dates; null marks a missing value. */
    public static DateColumn dates(String name, @Nullable LocalDate... values) {
        return DateColumn.of(name, values);
    }

    /** Names columns to read as texts, whatever they look like: {@code Table.read("faults.csv", asText("vehicle"))}. */
    public static AsText asText(String... columns) {
        return new AsText(List.of(columns));
    }
}
