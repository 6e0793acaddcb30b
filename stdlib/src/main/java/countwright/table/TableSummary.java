package countwright.table;

import countwright.show.Displayable;
import countwright.show.Grid;
import countwright.show.MimeBundle;
import countwright.show.Numbers;
import java.util.ArrayList;
import java.util.List;

/**
 * What each column of a table holds, in brief, set apart by kind.
 *
 * <p>Of numbers: how many are missing and how many distinct, the least, median, mean and greatest; of whole numbers that are
 * never negative, which may be counts, also the share of zeros and the total. Of texts: the levels in use and the most
 * common ones with their share of the rows. Of dates: the first, median and last.
 */
public final class TableSummary implements Displayable {

    private final List<Grid> grids;

    private TableSummary(List<Grid> grids) {
        this.grids = grids;
    }

    static TableSummary of(Table table) {
        List<List<String>> numbers = new ArrayList<>();
        List<List<String>> texts = new ArrayList<>();
        List<List<String>> dates = new ArrayList<>();
        for (Column column : table.columns()) {
            if (column instanceof NumberColumn found) {
                numbers.add(new NumberSummary(found).cells());
            } else if (column instanceof TextColumn found) {
                texts.add(LevelSummary.cells(found));
            } else {
                dates.add(timeCells(column));
            }
        }
        List<Grid> grids = new ArrayList<>();
        grids.add(Grid.titled(table.source() + ": " + Numbers.count(table.rowCount(), "row") + ", "
                + Numbers.count(table.columnNames().size(), "column")));
        if (!numbers.isEmpty()) {
            grids.add(NumberSummary.grid().rows(numbers).showingAll());
        }
        if (!texts.isEmpty()) {
            grids.add(LevelSummary.grid().rows(texts).showingAll());
        }
        if (!dates.isEmpty()) {
            grids.add(Grid.titled("")
                    .textColumn("Dates")
                    .numberColumn("missing")
                    .numberColumn("distinct")
                    .textColumn("first")
                    .textColumn("median")
                    .textColumn("last")
                    .rows(dates)
                    .showingAll());
        }
        return new TableSummary(List.copyOf(grids));
    }

    private static List<String> timeCells(Column column) {
        int missing = column.missingCount();
        int present = column.size() - missing;
        int[] order = RowOrder.ascending(column);
        long distinct = RowOrder.distinct(column);
        return List.of(
                column.name(),
                Numbers.count(missing),
                Numbers.count(distinct),
                present == 0 ? Numbers.ABSENT : column.text(order[0]),
                present == 0 ? Numbers.ABSENT : column.text(order[(present - 1) / 2]),
                present == 0 ? Numbers.ABSENT : column.text(order[present - 1]));
    }

    @Override
    public MimeBundle display() {
        StringBuilder html = new StringBuilder();
        for (Grid grid : grids) {
            html.append(grid.display().get(MimeBundle.HTML).orElse("")).append('\n');
        }
        return MimeBundle.text(toString()).withHtml(html.toString().strip());
    }

    @Override
    public String toString() {
        return String.join("\n\n", grids.stream().map(Grid::toString).toList());
    }
}
