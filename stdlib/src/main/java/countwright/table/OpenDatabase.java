package countwright.table;

import countwright.show.WarmUp;
import java.sql.Connection;
import java.sql.SQLException;

/** Opens the embedded database ahead of the first file. Public only because service loading needs it. */
public final class OpenDatabase implements WarmUp {

    /** Makes the service; called by the loader. */
    public OpenDatabase() {}

    @Override
    public void warmUp() {
        try (Connection connection = Database.connect()) {
            connection.isValid(1);
        } catch (SQLException e) {
            throw new IllegalStateException("the embedded database does not open: " + e.getMessage(), e);
        }
    }
}
