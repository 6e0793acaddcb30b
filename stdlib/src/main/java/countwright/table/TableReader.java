package countwright.table;

import java.sql.ResultSet;
import java.sql.SQLException;
import java.sql.Statement;
import java.util.ArrayList;
import java.util.List;
import org.duckdb.DuckDBChunkedResult;
import org.duckdb.DuckDBConnection;
import org.duckdb.DuckDBDataChunkReader;
import org.duckdb.DuckDBPreparedStatement;

/**
 * Fetches a staged file into columns, a chunk of about two thousand rows at a time: the engine's vectors cost about 5 ns
 * a number where the row interface of JDBC costs 45. Texts are fetched as codes, since making a string of each would cost
 * a hundred times as much.
 */
final class TableReader {

    /** From here on (2^53) neighbouring integers share a double. */
    private static final double FIRST_INEXACT = 9_007_199_254_740_992.0;

    private final DuckDBConnection connection;
    private final TableFile file;

    private TableReader(DuckDBConnection connection, TableFile file) {
        this.connection = connection;
        this.file = file;
    }

    static Table read(TableFile file, AsText asText) {
        try (DuckDBConnection connection = Database.connect()) {
            return new TableReader(connection, file).read(asText);
        } catch (SQLException e) {
            throw new IllegalArgumentException(ReadFailure.message(file, e), e);
        }
    }

    private Table read(AsText asText) throws SQLException {
        List<StagedColumn> staged = new Staging(connection, file, asText).load();
        int rows = rowCount();
        List<ColumnIntake> intakes = new ArrayList<>();
        List<String> fetched = new ArrayList<>();
        for (int i = 0; i < staged.size(); i++) {
            String enumeration = "levels_of_" + i;
            StagedColumn column = staged.get(i);
            String name = column.name();
            intakes.add(
                    switch (column.kind()) {
                        case WIDE_INTEGER, WRITTEN_NUMBER, NUMBER -> new ColumnIntake.Numbers(name, rows);
                        case TEXT -> new ColumnIntake.Texts(name, rows, levels(column, enumeration));
                        case DATE -> new ColumnIntake.Dates(name, rows);
                        case DATE_TIME -> new ColumnIntake.DateTimes(name, rows);
                    });
            fetched.add(column.fetched(enumeration));
        }
        fetch("SELECT " + String.join(", ", fetched) + " FROM " + Staging.TABLE, intakes);
        List<Column> columns = new ArrayList<>();
        for (int i = 0; i < staged.size(); i++) {
            Column column = intakes.get(i).finish();
            if (column instanceof NumberColumn numbers && staged.get(i).kind() != StagedColumn.Kind.NUMBER) {
                refuseLostDigits(staged.get(i), numbers);
            }
            columns.add(column);
        }
        return Table.of(file.name(), columns);
    }

    private int rowCount() throws SQLException {
        try (Statement statement = connection.createStatement();
                ResultSet count = statement.executeQuery("SELECT count(*) FROM " + Staging.TABLE)) {
            count.next();
            long rows = count.getLong(1);
            if (rows > Integer.MAX_VALUE - 8) {
                throw new IllegalArgumentException(file.name() + " has " + rows + " rows, more than a table in memory"
                        + " holds (" + (Integer.MAX_VALUE - 8) + "). Split the file, or keep only the rows you need.");
            }
            return (int) rows;
        }
    }

    /** Makes an enumeration of a column's values and returns them in its order. */
    private List<String> levels(StagedColumn column, String enumeration) throws SQLException {
        String distinct = "SELECT DISTINCT CAST(" + column.sql() + " AS VARCHAR) AS level FROM " + Staging.TABLE
                + " WHERE " + column.sql() + " IS NOT NULL ORDER BY level";
        List<String> levels = new ArrayList<>();
        try (Statement statement = connection.createStatement()) {
            statement.execute("CREATE TEMP TYPE " + enumeration + " AS ENUM (" + distinct + ")");
            String query = "SELECT unnest(enum_range(NULL::" + enumeration + "))::VARCHAR";
            try (ResultSet values = statement.executeQuery(query)) {
                while (values.next()) {
                    levels.add(values.getString(1));
                }
            }
        }
        return levels;
    }

    private void fetch(String query, List<ColumnIntake> intakes) throws SQLException {
        try (DuckDBPreparedStatement statement = connection.prepare(query);
                DuckDBChunkedResult result = statement.query()) {
            int row = 0;
            while (result.nextChunk()) {
                DuckDBDataChunkReader chunk = result.chunk();
                int count = (int) chunk.rowCount();
                for (int i = 0; i < intakes.size(); i++) {
                    intakes.get(i).take(chunk.vector(i), row, count);
                }
                row += count;
            }
        }
    }

    private void refuseLostDigits(StagedColumn column, NumberColumn numbers) throws SQLException {
        boolean beyond = false;
        for (int row = 0; row < numbers.size(); row++) {
            beyond |= Math.abs(numbers.value(row)) >= FIRST_INEXACT;
        }
        if (!beyond) {
            return;
        }
        String query = "SELECT rowid + 1, CAST(" + column.sql() + " AS VARCHAR) AS digits FROM " + Staging.TABLE
                + " WHERE abs(CAST(" + column.sql() + " AS DOUBLE)) >= 9007199254740992"
                + " AND regexp_full_match(digits, '[+-]?\\d+') ORDER BY rowid LIMIT 1";
        try (Statement statement = connection.createStatement();
                ResultSet first = statement.executeQuery(query)) {
            if (first.next()) {
                throw new IllegalArgumentException("column '" + column.name() + "' of " + file.name()
                        + " holds whole numbers too long to keep exactly: row " + first.getLong(1) + " is "
                        + first.getString(2) + ", and digits are lost beyond 9007199254740992 (2 to the power 53)."
                        + " If they are identifiers, read them as texts: Table.read(\"" + file.name()
                        + "\", asText(\"" + column.name() + "\")). If they are quantities, write them in a larger unit"
                        + " or with a decimal point.");
            }
        }
    }
}
