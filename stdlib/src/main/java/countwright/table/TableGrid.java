package countwright.table;

import countwright.show.Grid;
import countwright.show.Numbers;
import java.util.ArrayList;
import java.util.List;

/** Sets the first rows of a table as a grid, with the kind of each column below its name. */
final class TableGrid {

    private TableGrid() {}

    static Grid of(Table table, int shownRows) {
        int shown = Math.min(shownRows, table.rowCount());
        Grid grid = Grid.titled(table.source() + ": " + Numbers.count(table.rowCount(), "row") + ", "
                + Numbers.count(table.columnNames().size(), "column"));
        List<List<String>> rows = new ArrayList<>();
        for (int row = 0; row < shown; row++) {
            rows.add(new ArrayList<>());
        }
        boolean anyMissing = false;
        for (Column column : table.columns()) {
            if (column instanceof NumberColumn numbers) {
                grid = grid.numberColumn(column.name(), column.kind());
                CellFormat format = CellFormat.ofData(first(numbers, shown));
                for (int row = 0; row < shown; row++) {
                    rows.get(row).add(format.text(numbers.value(row)));
                }
            } else {
                grid = grid.textColumn(column.name(), column.kind());
                for (int row = 0; row < shown; row++) {
                    rows.get(row).add(column.isMissing(row) ? Numbers.ABSENT : column.text(row));
                }
            }
            for (int row = 0; row < shown; row++) {
                anyMissing |= column.isMissing(row);
            }
        }
        grid = grid.rows(rows).showingAll();
        int more = table.rowCount() - shown;
        if (more > 0) {
            grid = grid.note("⋮ " + Numbers.count(more) + " more; head(" + Math.min(table.rowCount(), 5 * shown)
                    + ") shows further rows, summary() all in brief.");
        }
        return anyMissing ? grid.note(Numbers.ABSENT + " marks a missing value.") : grid;
    }

    private static double[] first(NumberColumn numbers, int count) {
        double[] values = new double[count];
        numbers.copyTo(0, values, 0, count);
        return values;
    }
}
