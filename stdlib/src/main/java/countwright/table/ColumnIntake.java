package countwright.table;

import java.time.LocalDateTime;
import java.time.ZoneOffset;
import java.util.Arrays;
import java.util.Collections;
import java.util.List;
import org.duckdb.DuckDBReadableVector;
import org.jspecify.annotations.Nullable;

/** Takes in the values of one column, chunk by chunk, and makes the column of them. */
abstract sealed class ColumnIntake {

    final String name;

    ColumnIntake(String name) {
        this.name = name;
    }

    /** Takes the first values of a vector as those of the rows from {@code firstRow} on. */
    abstract void take(DuckDBReadableVector vector, int firstRow, int count);

    /** Returns the column; nothing may be taken in afterwards. */
    abstract Column finish();

    /** Takes doubles. */
    static final class Numbers extends ColumnIntake {

        private final double[] values;

        Numbers(String name, int rows) {
            super(name);
            this.values = new double[rows];
        }

        @Override
        void take(DuckDBReadableVector vector, int firstRow, int count) {
            for (int i = 0; i < count; i++) {
                values[firstRow + i] = vector.getDouble(i, Double.NaN);
            }
        }

        @Override
        Column finish() {
            return NumberColumn.keeping(name, values);
        }
    }

    /** Takes codes into levels. */
    static final class Texts extends ColumnIntake {

        private final List<String> levels;
        private final int[] codes;

        Texts(String name, int rows, List<String> levels) {
            super(name);
            this.levels = levels;
            this.codes = new int[rows];
        }

        @Override
        void take(DuckDBReadableVector vector, int firstRow, int count) {
            for (int i = 0; i < count; i++) {
                codes[firstRow + i] = vector.getInt(i, TextColumn.MISSING);
            }
        }

        /** Renumbers where the engine's order, by code point, differs from Java's, by UTF-16 unit. */
        @Override
        Column finish() {
            List<String> sorted = levels.stream().sorted().toList();
            if (!sorted.equals(levels)) {
                int[] renumbered = new int[levels.size()];
                Arrays.setAll(renumbered, code -> Collections.binarySearch(sorted, levels.get(code)));
                for (int row = 0; row < codes.length; row++) {
                    codes[row] = codes[row] == TextColumn.MISSING ? TextColumn.MISSING : renumbered[codes[row]];
                }
            }
            return TextColumn.keeping(name, sorted, codes);
        }
    }

    /** Takes days since 1970-01-01. */
    static final class Dates extends ColumnIntake {

        private static final int MISSING = Integer.MIN_VALUE;

        private final int[] epochDays;

        Dates(String name, int rows) {
            super(name);
            this.epochDays = new int[rows];
        }

        @Override
        void take(DuckDBReadableVector vector, int firstRow, int count) {
            for (int i = 0; i < count; i++) {
                epochDays[firstRow + i] = vector.getInt(i, MISSING);
            }
        }

        @Override
        Column finish() {
            return DateColumn.keeping(name, epochDays);
        }
    }

    /** Takes microseconds since 1970-01-01T00:00. */
    static final class DateTimes extends ColumnIntake {

        private static final long MISSING = Long.MIN_VALUE;
        private static final long MICROS = 1_000_000;

        private final @Nullable LocalDateTime[] moments;

        DateTimes(String name, int rows) {
            super(name);
            this.moments = new LocalDateTime[rows];
        }

        @Override
        void take(DuckDBReadableVector vector, int firstRow, int count) {
            for (int i = 0; i < count; i++) {
                long micros = vector.getLong(i, MISSING);
                if (micros != MISSING) {
                    int nanos = (int) Math.floorMod(micros, MICROS) * 1_000;
                    moments[firstRow + i] =
                            LocalDateTime.ofEpochSecond(Math.floorDiv(micros, MICROS), nanos, ZoneOffset.UTC);
                }
            }
        }

        @Override
        Column finish() {
            return DateTimeColumn.keeping(name, moments);
        }
    }
}
