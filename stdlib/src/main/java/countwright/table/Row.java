package countwright.table;

import java.time.LocalDate;

/** One row of a table, for conditions and derived columns. The index counts from 0. */
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

    /**
     * Returns the date in a column of dates or date-times.
     *
     * @throws IllegalArgumentException if the column is unknown, does not hold dates, or has none in this row
     */
    public LocalDate date(String column) {
        Column found = table.column(column);
        if (!(found instanceof DateColumn) && !(found instanceof DateTimeColumn)) {
            throw new IllegalArgumentException("column '" + column + "' of " + table.source() + " holds " + found.kind()
                    + ", not dates. A date is written 2024-12-31 in a file.");
        }
        if (found.isMissing(index)) {
            throw new IllegalArgumentException("column '" + column + "' of " + table.source() + " has no date in row "
                    + (index + 1) + ". Leave such rows out first: table.where(row -> !row.isMissing(\"" + column
                    + "\")).");
        }
        return found instanceof DateColumn dates
                ? dates.date(index).orElseThrow()
                : ((DateTimeColumn) found).moment(index).orElseThrow().toLocalDate();
    }

    /**
     * Returns whether the value in a column is missing.
     *
     * @throws IllegalArgumentException if the column is unknown
     */
    public boolean isMissing(String column) {
        return table.column(column).isMissing(index);
    }
}
