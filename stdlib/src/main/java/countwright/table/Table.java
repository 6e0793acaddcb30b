package countwright.table;

import countwright.show.Displayable;
import countwright.show.MimeBundle;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Predicate;

/** Columns of equal length, each with its own name. Immutable; rows count from 0 in code and from 1 in messages. */
public final class Table implements Displayable {

    private final String source;
    private final Map<String, Column> columns;
    private final int rowCount;

    private Table(String source, Map<String, Column> columns, int rowCount) {
        this.source = source;
        this.columns = columns;
        this.rowCount = rowCount;
    }

    /**
     * Returns a table of the given columns.
     *
     * @throws IllegalArgumentException if two columns share a name or differ in length
     */
    public static Table of(Column... columns) {
        return of("table", Arrays.asList(columns));
    }

    /**
     * Reads a file: CSV, TSV, Parquet or JSON (an array of objects, or one object a line), told apart by the end of its
     * name.
     *
     * <p>In CSV the first line names the columns; blank lines and lines that begin with '#' may stand above it. Fields are
     * separated by whichever of comma, semicolon, tab and '|' the header line has most of; a field may stand in double
     * quotes. The file is in UTF-8. A column becomes numbers if all its values are numbers with a decimal point, dates if
     * all are written 2024-12-31, date-times if all are written 2024-12-31T23:59 (with a blank for the T, seconds and
     * fractions if wanted); else it becomes text. A date-time with an offset from UTC is taken over in UTC. Missing is an
     * empty field or NA; a column of which every value is missing becomes numbers. In Parquet and JSON the types are those of
     * the file; true and false become texts.
     *
     * @param path the file, absolute or from the working folder
     * @throws IllegalArgumentException if the file is not there or cannot be read, saying where and what to do; if a column
     *     is of a type a table cannot hold, or holds whole numbers beyond 2^53, whose digits would be lost
     */
    public static Table read(String path) {
        return TableReader.read(TableFile.find(path));
    }

    /** Reads a file as {@link #read(String)} does. */
    public static Table read(Path path) {
        return TableReader.read(TableFile.find(path));
    }

    static Table of(String source, List<? extends Column> columns) {
        Map<String, Column> byName = new LinkedHashMap<>();
        int rowCount = columns.isEmpty() ? 0 : columns.get(0).size();
        for (Column column : columns) {
            if (column.size() != rowCount) {
                throw new IllegalArgumentException(
                        "columns of a table have equal length, but '" + column.name() + "' has " + column.size()
                                + " rows where '" + columns.get(0).name() + "' has " + rowCount + ".");
            }
            if (byName.put(column.name(), column) != null) {
                throw new IllegalArgumentException(
                        "two columns are called '" + column.name() + "'; rename one of them with named(...).");
            }
        }
        return new Table(source, byName, rowCount);
    }

    /** Returns where the table came from, for messages: a file's name, or "table". */
    public String source() {
        return source;
    }

    /** Returns the number of rows. */
    public int rowCount() {
        return rowCount;
    }

    /** Returns the names of the columns, in order. */
    public List<String> columnNames() {
        return List.copyOf(columns.keySet());
    }

    /** Returns the columns, in order. */
    public List<Column> columns() {
        return List.copyOf(columns.values());
    }

    /** Returns whether there is a column of this name. */
    public boolean has(String name) {
        return columns.containsKey(name);
    }

    /**
     * Returns a column by name.
     *
     * @throws IllegalArgumentException if there is none, naming the columns there are and any that is close
     */
    public Column column(String name) {
        Column column = columns.get(name);
        if (column == null) {
            throw new IllegalArgumentException("no column '" + name + "' in " + source + ". Its columns are "
                    + String.join(", ", columns.keySet()) + ".");
        }
        return column;
    }

    /**
     * Returns a column of numbers by name.
     *
     * @throws IllegalArgumentException if there is none, or if it holds something other than numbers
     */
    public NumberColumn numbers(String name) {
        if (column(name) instanceof NumberColumn numbers) {
            return numbers;
        }
        throw new IllegalArgumentException(
                "'" + name + "' holds " + column(name).kind() + ", not numbers.");
    }

    /** Returns the rows for which a condition holds, in their order. */
    public Table where(Predicate<Row> condition) {
        int[] kept = new int[rowCount];
        int count = 0;
        for (int row = 0; row < rowCount; row++) {
            if (condition.test(new Row(this, row))) {
                kept[count++] = row;
            }
        }
        return rows(Arrays.copyOf(kept, count));
    }

    /** Returns the given rows, counted from 0, in the given order. */
    public Table rows(int... rows) {
        List<Column> chosen = new ArrayList<>();
        for (Column column : columns.values()) {
            chosen.add(column.rows(rows));
        }
        return of(source, chosen);
    }

    /** Returns this table with a column added at the end, or replaced where the name is taken. */
    public Table with(Column column) {
        Map<String, Column> newColumns = new LinkedHashMap<>(columns);
        newColumns.put(column.name(), column);
        return of(source, List.copyOf(newColumns.values()));
    }

    @Override
    public MimeBundle display() {
        return MimeBundle.text(toString());
    }

    @Override
    public String toString() {
        return source + ": " + rowCount + " rows, columns " + String.join(", ", columns.keySet());
    }
}
