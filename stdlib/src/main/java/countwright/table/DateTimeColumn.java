package countwright.table;

import java.time.LocalDateTime;
import java.util.Arrays;
import java.util.Optional;
import org.jspecify.annotations.Nullable;

/** A column of local date-times, without a time zone. */
public final class DateTimeColumn implements Column {

    private final String name;
    private final @Nullable LocalDateTime[] moments;

    private DateTimeColumn(String name, @Nullable LocalDateTime[] moments) {
        this.name = name;
        this.moments = moments;
    }

    /** Returns a column of the given date-times; null marks a missing value. */
    public static DateTimeColumn of(String name, @Nullable LocalDateTime... moments) {
        return new DateTimeColumn(name, Arrays.copyOf(moments, moments.length));
    }

    /** Returns a column that keeps the array it is given; null marks a missing value. */
    static DateTimeColumn keeping(String name, @Nullable LocalDateTime[] moments) {
        return new DateTimeColumn(name, moments);
    }

    /** Returns the date-time in a row, or nothing where it is missing. */
    public Optional<LocalDateTime> moment(int row) {
        return Optional.ofNullable(moments[row]);
    }

    @Override
    public String name() {
        return name;
    }

    @Override
    public int size() {
        return moments.length;
    }

    @Override
    public boolean isMissing(int row) {
        return moments[row] == null;
    }

    @Override
    public String text(int row) {
        return moment(row).map(LocalDateTime::toString).orElse("");
    }

    @Override
    public String kind() {
        return "date-times";
    }

    @Override
    public DateTimeColumn named(String newName) {
        return new DateTimeColumn(newName, moments);
    }

    @Override
    public DateTimeColumn rows(int[] rows) {
        @Nullable LocalDateTime[] chosen = new LocalDateTime[rows.length];
        for (int i = 0; i < rows.length; i++) {
            chosen[i] = moments[rows[i]];
        }
        return new DateTimeColumn(name, chosen);
    }

    @Override
    public String toString() {
        return name + ": " + moments.length + " date-times";
    }
}
