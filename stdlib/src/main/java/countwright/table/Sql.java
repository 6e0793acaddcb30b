package countwright.table;

/** Names and texts quoted for SQL. */
final class Sql {

    private Sql() {}

    static String name(String identifier) {
        return "\"" + identifier.replace("\"", "\"\"") + "\"";
    }

    static String text(String value) {
        return "'" + value.replace("'", "''") + "'";
    }
}
