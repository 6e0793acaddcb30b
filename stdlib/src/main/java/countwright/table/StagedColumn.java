package countwright.table;

/**
 * A column of the staging table and what it will become.
 *
 * @param name the name it gets in the table
 * @param sql the SQL that names it in the staging table
 * @param kind what it becomes
 */
record StagedColumn(String name, String sql, Kind kind) {

    /** How a column is fetched; the codes of a text are positions in an enumeration made for the column. */
    enum Kind {
        /** Integers of a type wide enough to hold more digits than a double does. */
        WIDE_INTEGER,
        /** Numbers written out in a file of text, which may be integers of any length. */
        WRITTEN_NUMBER,
        NUMBER,
        TEXT,
        DATE,
        DATE_TIME
    }

    /** Returns the SQL for the values as they are fetched: a DOUBLE, an INTEGER or a BIGINT. */
    String fetched(String enumeration) {
        return switch (kind) {
            case WIDE_INTEGER, WRITTEN_NUMBER, NUMBER -> "CAST(" + sql + " AS DOUBLE)";
            case TEXT -> "CAST(enum_code(CAST(" + sql + " AS VARCHAR)::" + enumeration + ") AS INTEGER)";
            case DATE -> "CAST(CAST(" + sql + " AS DATE) - DATE '1970-01-01' AS INTEGER)";
            case DATE_TIME -> "epoch_us(CAST(" + sql + " AS TIMESTAMP))";
        };
    }
}
