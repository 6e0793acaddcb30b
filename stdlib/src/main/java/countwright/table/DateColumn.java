package countwright.table;

import java.time.LocalDate;
import java.util.Optional;
import org.jspecify.annotations.Nullable;

/** A column of calendar dates, held as days since 1970-01-01. */
public final class DateColumn implements Column {

    private static final int MISSING = Integer.MIN_VALUE;

    private final String name;
    private final int[] epochDays;

    private DateColumn(String name, int[] epochDays) {
        this.name = name;
        this.epochDays = epochDays;
    }

    /** Returns a column of the given dates; null marks a missing value. */
    public static DateColumn of(String name, @Nullable LocalDate... dates) {
        int[] epochDays = new int[dates.length];
        for (int row = 0; row < dates.length; row++) {
            LocalDate date = dates[row];
            epochDays[row] = date == null ? MISSING : Math.toIntExact(date.toEpochDay());
        }
        return new DateColumn(name, epochDays);
    }

    /** Returns a column that keeps the days it is given; the least integer marks a missing value. */
    static DateColumn keeping(String name, int[] epochDays) {
        return new DateColumn(name, epochDays);
    }

    /** Returns the days from 1970-01-01 to the date in a row that has one. */
    int epochDay(int row) {
        return epochDays[row];
    }

    /** Returns the date in a row, or nothing where it is missing. */
    public Optional<LocalDate> date(int row) {
        return isMissing(row) ? Optional.empty() : Optional.of(LocalDate.ofEpochDay(epochDays[row]));
    }

    @Override
    public String name() {
        return name;
    }

    @Override
    public int size() {
        return epochDays.length;
    }

    @Override
    public boolean isMissing(int row) {
        return epochDays[row] == MISSING;
    }

    @Override
    public String text(int row) {
        return date(row).map(LocalDate::toString).orElse("");
    }

    @Override
    public String kind() {
        return "dates";
    }

    @Override
    public DateColumn named(String newName) {
        return new DateColumn(newName, epochDays);
    }

    @Override
    public DateColumn rows(int[] rows) {
        int[] chosen = new int[rows.length];
        for (int i = 0; i < rows.length; i++) {
            chosen[i] = epochDays[rows[i]];
        }
        return new DateColumn(name, chosen);
    }

    @Override
    public String toString() {
        return name + ": " + epochDays.length + " dates";
    }
}
