package countwright.table;

import java.io.IOException;
import java.nio.file.Files;
import java.sql.SQLException;
import java.sql.Statement;
import java.util.Properties;
import org.duckdb.DuckDBConnection;
import org.duckdb.DuckDBDriver;
import org.jspecify.annotations.Nullable;

/**
 * The embedded database that reads files: one in memory for the whole process, opened when first needed, since loading its
 * native part takes most of a second. Each piece of work gets a connection of its own, so that threads do not meet.
 */
final class Database {

    private static @Nullable DuckDBConnection shared;

    private Database() {}

    /**
     * Returns a new connection; the caller closes it.
     *
     * @throws SQLException if the native part cannot be loaded
     */
    static synchronized DuckDBConnection connect() throws SQLException {
        DuckDBConnection open = shared;
        if (open == null) {
            open = open();
            shared = open;
        }
        return open.duplicate();
    }

    /**
     * Opens without reaching for the network: what is needed is built in. Data larger than memory spills into the
     * temporary folder, not into the user's working folder, which is the engine's own choice.
     */
    private static DuckDBConnection open() throws SQLException {
        Properties settings = new Properties();
        settings.setProperty("autoinstall_known_extensions", "false");
        settings.setProperty("autoload_known_extensions", "false");
        DuckDBConnection connection =
                new DuckDBDriver().connect("jdbc:duckdb:", settings).unwrap(DuckDBConnection.class);
        try (Statement statement = connection.createStatement()) {
            String spill = Files.createTempDirectory("countwright-spill").toString();
            statement.execute("SET temp_directory = " + Sql.text(spill));
            statement.execute("SET TimeZone = 'UTC'");
        } catch (IOException e) {
            throw new SQLException("cannot make a temporary folder: " + e.getMessage(), e);
        }
        return connection;
    }
}
