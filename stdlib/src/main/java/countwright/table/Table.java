package countwright.table;

import countwright.show.Displayable;
import countwright.show.MimeBundle;
import countwright.show.NearNames;
import countwright.show.Numbers;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Function;
import java.util.function.Predicate;
import java.util.function.ToDoubleFunction;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;

/** Columns of equal length, each with its own name. Immutable; rows count from 0 in code and from 1 in messages. */
public final class Table implements Displayable {

    private static final int SHOWN_WHOLE = 20;
    private static final int SHOWN_FIRST = 10;

    private final String source;
    private final Map<String, Column> columns;
    private final int rowCount;
    private final int shownRows;

    private Table(String source, Map<String, Column> columns, int rowCount, int shownRows) {
        this.source = source;
        this.columns = columns;
        this.rowCount = rowCount;
        this.shownRows = shownRows;
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
     * Returns a table of every combination of the values of the given columns, the last varying fastest; for scenarios.
     *
     * @throws IllegalArgumentException if two columns share a name
     */
    public static Table crossing(Column... columns) {
        int rowCount = columns.length == 0 ? 0 : 1;
        for (Column column : columns) {
            rowCount = Math.multiplyExact(rowCount, column.size());
        }
        List<Column> crossed = new ArrayList<>();
        int repeats = rowCount;
        for (Column column : columns) {
            int size = Math.max(column.size(), 1);
            int run = repeats / size;
            int[] rows = new int[rowCount];
            Arrays.setAll(rows, row -> row / Math.max(run, 1) % size);
            crossed.add(column.rows(rows));
            repeats = run;
        }
        return of("table", crossed);
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
        return TableReader.read(TableFile.find(path), AsText.NONE);
    }

    /**
     * Reads a file as {@link #read(String)} does, but takes some columns over as texts, as they are written; for identifiers
     * such as 007: {@code Table.read("faults.csv", asText("vehicle"))}.
     *
     * @throws IllegalArgumentException as there, and if the file has no column of such a name
     */
    public static Table read(String path, AsText asText) {
        return TableReader.read(TableFile.find(path), asText);
    }

    /** Reads a file as {@link #read(String)} does. */
    public static Table read(Path path) {
        return TableReader.read(TableFile.find(path), AsText.NONE);
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
        return new Table(source, byName, rowCount, rowCount <= SHOWN_WHOLE ? rowCount : SHOWN_FIRST);
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
            String question = NearNames.question(name, columns.keySet());
            throw new IllegalArgumentException("there is no column '" + name + "' in " + source + ". "
                    + (question.isEmpty() ? "" : question + " ")
                    + (columns.isEmpty()
                            ? "It has no columns."
                            : "Its columns are " + NearNames.list(columns.keySet()) + "."));
        }
        return column;
    }

    /**
     * Returns a column of numbers by name.
     *
     * @throws IllegalArgumentException if there is none, or if it holds something other than numbers, naming the first row
     *     that does
     */
    public NumberColumn numbers(String name) {
        Column column = column(name);
        if (column instanceof NumberColumn numbers) {
            return numbers;
        }
        throw WrongKind.notNumbers(column, source);
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

    /**
     * Returns the given rows, counted from 0, in the given order.
     *
     * @throws IllegalArgumentException if a row does not exist
     */
    public Table rows(int... rows) {
        for (int row : rows) {
            if (row < 0 || row >= rowCount) {
                throw new IllegalArgumentException("there is no row " + row + " in " + source + ": its "
                        + Numbers.count(rowCount, "row") + " are counted from 0 here.");
            }
        }
        List<Column> chosen = new ArrayList<>();
        for (Column column : columns.values()) {
            chosen.add(column.rows(rows));
        }
        return of(source, chosen);
    }

    /**
     * Returns the first rows, all of which are shown when this is the result of a cell.
     *
     * @param count how many, 0 or more; more than there are gives all
     */
    public Table head(int count) {
        if (count < 0) {
            throw new IllegalArgumentException("head takes 0 or more rows, but was asked for " + count + ".");
        }
        Table first = rows(IntStream.range(0, Math.min(count, rowCount)).toArray());
        return new Table(source, first.columns, first.rowCount, first.rowCount);
    }

    /**
     * Returns this table with only the named columns, in the given order.
     *
     * @throws IllegalArgumentException if a column is unknown or named twice
     */
    public Table select(String... names) {
        return of(source, Arrays.stream(names).map(this::column).toList());
    }

    /**
     * Returns the rows in ascending order of a column: numbers by size, texts by letter, dates by time. Missing values come
     * last; equal ones keep their order.
     *
     * @throws IllegalArgumentException if the column is unknown
     */
    public Table sortedBy(String name) {
        return rows(RowOrder.ascending(column(name)));
    }

    /** Returns the rows in descending order of a column, otherwise as {@link #sortedBy} does; missing values come last. */
    public Table sortedDescendingBy(String name) {
        return rows(RowOrder.descending(column(name)));
    }

    /** Returns what each column holds, in brief. */
    public TableSummary summary() {
        return TableSummary.of(this);
    }

    /** Returns this table with a column added at the end, or replaced where the name is taken. */
    public Table with(Column column) {
        Map<String, Column> newColumns = new LinkedHashMap<>(columns);
        newColumns.put(column.name(), column);
        return of(source, List.copyOf(newColumns.values()));
    }

    /**
     * Returns this table with a column of numbers worked out row by row, added at the end or put where the name is taken:
     * {@code table.with("logDose", row -> Math.log(row.number("dose") + 10))}.
     *
     * @param value gives the number; NaN where it is missing, which is accepted only in a row that lacks some value
     * @throws IllegalArgumentException if a value is infinite, or NaN in a row that lacks nothing, naming the row
     */
    public Table with(String name, ToDoubleFunction<Row> value) {
        double[] values = new double[rowCount];
        for (int row = 0; row < rowCount; row++) {
            values[row] = value.applyAsDouble(new Row(this, row));
            if (Double.isInfinite(values[row]) || (Double.isNaN(values[row]) && isComplete(row))) {
                throw new IllegalArgumentException("'" + name + "' would be " + values[row] + " in row " + (row + 1)
                        + " of " + source + ". Look at that row for a value the calculation cannot take, such as 0 in a"
                        + " logarithm or in a division.");
            }
        }
        return with(NumberColumn.keeping(name, values));
    }

    /**
     * Returns this table with a column of texts worked out row by row, added at the end or put where the name is taken.
     *
     * @param value gives the text; an empty text stands for a missing value
     */
    public Table withText(String name, Function<Row, String> value) {
        @Nullable String[] values = new String[rowCount];
        for (int row = 0; row < rowCount; row++) {
            String text = value.apply(new Row(this, row));
            values[row] = text.isEmpty() ? null : text;
        }
        return with(TextColumn.of(name, values));
    }

    private boolean isComplete(int row) {
        for (Column column : columns.values()) {
            if (column.isMissing(row)) {
                return false;
            }
        }
        return true;
    }

    @Override
    public MimeBundle display() {
        return TableGrid.of(this, shownRows).display();
    }

    @Override
    public String toString() {
        return TableGrid.of(this, shownRows).toString();
    }
}
