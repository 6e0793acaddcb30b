package countwright.table;

/** One row of a table, for conditions and derived columns. */
public record Row(Table table, int index) {

    /**
     * Returns the number in a column, or NaN where it is missing.
     *
     * @throws IllegalArgumentException if the column is unknown or does not hold numbers
     */
    public double number(String column) {
        return table.numbers(column).value(index);
    }

    /**
     * Returns the value in a column as text, empty where it is missing.
     *
     * @throws IllegalArgumentException if the column is unknown
     */
    public String text(String column) {
        return table.column(column).text(index);
    }
}
