package countwright.table;

import countwright.show.NearNames;
import java.io.IOException;
import java.sql.Connection;
import java.sql.ResultSet;
import java.sql.SQLException;
import java.sql.Statement;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import java.util.stream.Collectors;

/**
 * Loads a file into the temporary table {@value #TABLE} of a connection and settles what each column is.
 *
 * <p>A text file is loaded as text and its columns are judged by all their values, not by a sample and not by the engine's
 * own guess: that guess costs a second reading by one thread, which takes longer than all of this, and it turns long
 * integers into rounded doubles and day-first dates into month-first ones.
 */
final class Staging {

    static final String TABLE = "staged";

    private static final int SAMPLE_ROWS = 2_000;

    private final Connection connection;
    private final TableFile file;
    private final AsText asText;

    Staging(Connection connection, TableFile file, AsText asText) {
        this.connection = connection;
        this.file = file;
        this.asText = asText;
    }

    /** Loads the file and returns its columns in order. */
    List<StagedColumn> load() throws SQLException {
        String path = Sql.text(literalPath());
        List<StagedColumn> columns = switch (file.format()) {
            case CSV, TSV -> loadText(path);
            case PARQUET -> loadTyped("read_parquet(" + path + ", hive_partitioning = false)");
            case JSON -> loadTyped("read_json(" + path + ", sample_size = -1, hive_partitioning = false)");
        };
        List<String> names = columns.stream().map(StagedColumn::name).toList();
        for (String name : asText.columns()) {
            if (!names.contains(name)) {
                String question = NearNames.question(name, names);
                throw new IllegalArgumentException("asText names '" + name + "', but " + file.name()
                        + " has no such column. " + (question.isEmpty() ? "" : question + " ") + "Its columns are "
                        + NearNames.list(names) + ".");
            }
        }
        return columns;
    }

    /** Returns the path with the signs escaped that would otherwise stand for any name. */
    private String literalPath() {
        return file.path().toString().replaceAll("([\\[*?])", "[$1]");
    }

    private List<StagedColumn> loadText(String path) throws SQLException {
        CsvHead head;
        try {
            head = CsvHead.of(file);
        } catch (IOException e) {
            throw new SQLException(e.getMessage(), e);
        }
        List<String> columns = new ArrayList<>();
        for (int i = 0; i < head.names().size(); i++) {
            columns.add("c" + i);
        }
        String types = columns.stream().map(c -> "'" + c + "': 'VARCHAR'").collect(Collectors.joining(", "));
        execute("CREATE TEMP TABLE " + TABLE + " AS FROM read_csv(" + path
                + ", auto_detect = false, header = true, skip = " + head.skippedLines()
                + ", delim = " + Sql.text(String.valueOf(head.separator()))
                + ", quote = '\"', escape = '\"', nullstr = ['', 'NA'], hive_partitioning = false, columns = {" + types
                + "})");
        List<Set<Written>> possible = new ArrayList<>();
        for (String name : head.names()) {
            possible.add(EnumSet.allOf(Written.class));
            if (asText.columns().contains(name)) {
                possible.get(possible.size() - 1).clear();
            }
        }
        rejectIn(TABLE + " LIMIT " + SAMPLE_ROWS, columns, possible);
        rejectIn(TABLE, columns, possible);
        List<StagedColumn> staged = new ArrayList<>();
        for (int i = 0; i < columns.size(); i++) {
            StagedColumn.Kind kind = possible.get(i).stream()
                    .findFirst()
                    .map(written -> written.kind)
                    .orElse(StagedColumn.Kind.TEXT);
            staged.add(new StagedColumn(head.names().get(i), columns.get(i), kind));
        }
        return staged;
    }

    /** Strikes out, for each column, what at least one of its values in some rows is not. */
    private void rejectIn(String rows, List<String> columns, List<Set<Written>> possible) throws SQLException {
        List<String> counts = new ArrayList<>();
        for (int i = 0; i < columns.size(); i++) {
            String column = columns.get(i);
            for (Written written : possible.get(i)) {
                counts.add("count(" + column + ") - count(" + written.test.replace("?", column) + ")");
            }
        }
        if (counts.isEmpty()) {
            return;
        }
        String query = "SELECT " + String.join(", ", counts) + " FROM (FROM " + rows + ")";
        try (Statement statement = connection.createStatement();
                ResultSet failures = statement.executeQuery(query)) {
            failures.next();
            int index = 0;
            for (Set<Written> kinds : possible) {
                for (Written written : List.copyOf(kinds)) {
                    if (failures.getLong(++index) > 0) {
                        kinds.remove(written);
                    }
                }
            }
        }
    }

    private List<StagedColumn> loadTyped(String relation) throws SQLException {
        execute("CREATE TEMP TABLE " + TABLE + " AS FROM " + relation);
        List<StagedColumn> staged = new ArrayList<>();
        try (Statement statement = connection.createStatement();
                ResultSet columns =
                        statement.executeQuery("SELECT column_name, column_type FROM (DESCRIBE " + TABLE + ")")) {
            while (columns.next()) {
                String name = columns.getString(1);
                staged.add(new StagedColumn(name, Sql.name(name), kind(name, columns.getString(2))));
            }
        }
        return staged;
    }

    private StagedColumn.Kind kind(String column, String type) {
        if (asText.columns().contains(column)) {
            return StagedColumn.Kind.TEXT;
        }
        if (type.startsWith("DECIMAL(")) {
            return StagedColumn.Kind.NUMBER;
        }
        if (type.startsWith("ENUM(")) {
            return StagedColumn.Kind.TEXT;
        }
        return switch (type) {
            case "TINYINT", "SMALLINT", "INTEGER", "UTINYINT", "USMALLINT", "UINTEGER", "FLOAT", "DOUBLE" ->
                StagedColumn.Kind.NUMBER;
            case "BIGINT", "UBIGINT", "HUGEINT", "UHUGEINT" -> StagedColumn.Kind.WIDE_INTEGER;
            case "VARCHAR", "BOOLEAN", "UUID", "TIME" -> StagedColumn.Kind.TEXT;
            case "DATE" -> StagedColumn.Kind.DATE;
            case "TIMESTAMP", "TIMESTAMP_S", "TIMESTAMP_MS", "TIMESTAMP_NS", "TIMESTAMP WITH TIME ZONE" ->
                StagedColumn.Kind.DATE_TIME;
            default ->
                throw new IllegalArgumentException("column '" + column + "' of " + file.name() + " is of type "
                        + type + ", which a table cannot hold: it holds numbers, texts, dates and date-times."
                        + " Write the file again without it, or with its parts as columns of their own.");
        };
    }

    private void execute(String sql) throws SQLException {
        try (Statement statement = connection.createStatement()) {
            statement.execute(sql);
        }
    }

    /** What the values of a text file may be, tried in this order; a column of missing values only counts as numbers. */
    private enum Written {
        /** The engine would also read 1_000, which is more likely a code than a number. */
        NUMBER(StagedColumn.Kind.WRITTEN_NUMBER, "CASE WHEN NOT contains(?, '_') THEN TRY_CAST(? AS DOUBLE) END"),
        DATE(
                StagedColumn.Kind.DATE,
                "CASE WHEN regexp_full_match(?, '\\d{4}-\\d\\d-\\d\\d') THEN TRY_CAST(? AS DATE) END"),
        DATE_TIME(
                StagedColumn.Kind.DATE_TIME,
                "CASE WHEN regexp_full_match(?, '\\d{4}-\\d\\d-\\d\\d[T ]\\d\\d:\\d\\d.*') THEN TRY_CAST(? AS TIMESTAMP) END");

        private final StagedColumn.Kind kind;
        private final String test;

        Written(StagedColumn.Kind kind, String test) {
            this.kind = kind;
            this.test = test;
        }
    }
}
