package countwright.chart;

import countwright.table.NumberColumn;
import countwright.table.Table;
import java.util.Arrays;
import java.util.Optional;

/**
 * Counts and their exposures, checked: whole numbers from 0 over positive amounts. Rows in which one of them is missing
 * are left out and counted.
 */
final class Counted {

    private final Table table;
    private final String unit;
    private final String countName;
    private final double[] counts;
    private final double[] exposures;
    private final int leftOut;

    private Counted(Table table, String countName, String unit, double[] counts, double[] exposures, int leftOut) {
        this.table = table;
        this.countName = countName;
        this.unit = unit;
        this.counts = counts;
        this.exposures = exposures;
        this.leftOut = leftOut;
    }

    /**
     * Reads the rows of a table that have a count, an exposure (1 in each row without one) and a group.
     *
     * @throws IllegalArgumentException if a column is unknown or holds no numbers, if a count is not a whole number from
     *     0, if an exposure is not positive and finite, or if no row is left
     */
    static Counted read(Table table, String countColumn, Optional<String> exposureColumn, String groupColumn) {
        NumberColumn countValues = table.numbers(countColumn);
        Optional<NumberColumn> exposureValues = exposureColumn.map(table::numbers);
        var group = table.column(groupColumn);
        int[] kept = new int[table.rowCount()];
        int size = 0;
        for (int row = 0; row < table.rowCount(); row++) {
            int current = row;
            boolean missing = countValues.isMissing(row)
                    || group.isMissing(row)
                    || exposureValues.map(column -> column.isMissing(current)).orElse(false);
            if (missing) {
                continue;
            }
            double count = countValues.value(row);
            if (!(count >= 0) || count != Math.rint(count) || Double.isInfinite(count)) {
                throw new IllegalArgumentException("counts are whole numbers from 0, but row " + (row + 1)
                        + " of column '" + countColumn + "' is " + countValues.text(row)
                        + ". Correct the row, or leave it out with where(...).");
            }
            exposureValues.ifPresent(column -> checkExposure(column, current));
            kept[size++] = row;
        }
        if (size == 0) {
            throw new IllegalArgumentException("there is nothing to draw: of " + table.rowCount() + " rows in "
                    + table.source() + " none has a value in " + named(countColumn, exposureColumn, groupColumn) + ".");
        }
        Table used = table.rows(Arrays.copyOf(kept, size));
        double[] exposures = new double[size];
        Arrays.fill(exposures, 1);
        exposureColumn.ifPresent(name -> used.numbers(name).copyTo(0, exposures, 0, exposures.length));
        return new Counted(
                used,
                countColumn,
                exposureColumn.orElse(""),
                used.numbers(countColumn).toArray(),
                exposures,
                table.rowCount() - size);
    }

    /** Returns the rows used. */
    Table table() {
        return table;
    }

    String countName() {
        return countName;
    }

    /** Returns the name of the exposure column, empty where there is none. */
    String unit() {
        return unit;
    }

    double[] counts() {
        return counts.clone();
    }

    double[] exposures() {
        return exposures.clone();
    }

    /** Returns a sentence on the rows left out; empty if there are none. */
    String leftOutSentence() {
        return leftOut == 0
                ? ""
                : " " + NumberText.count(leftOut, "row with a missing value is", "rows with missing values are")
                        + " left out.";
    }

    private static void checkExposure(NumberColumn column, int row) {
        double exposure = column.value(row);
        if (!(exposure > 0) || Double.isInfinite(exposure)) {
            throw new IllegalArgumentException("exposure must be positive and finite, but row " + (row + 1)
                    + " of column '" + column.name() + "' is " + column.text(row)
                    + ". Correct the row, or leave it out with where(...).");
        }
    }

    private static String named(String countColumn, Optional<String> exposureColumn, String groupColumn) {
        return "'" + countColumn + "'"
                + exposureColumn.map(name -> ", '" + name + "'").orElse("") + " and '" + groupColumn + "'";
    }
}
