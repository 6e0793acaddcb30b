package countwright.chart;

import countwright.show.Numbers;
import countwright.table.Column;
import countwright.table.NumberColumn;
import countwright.table.Table;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Comparator;
import java.util.List;

/**
 * Tables that vary one covariate and hold all others at a typical value: the lower median of a number (a value that was
 * observed), and the level with the most rows of anything else.
 */
final class Scenarios {

    private final Fit fit;
    private final String varied;
    private final List<String> held = new ArrayList<>();
    private final List<Column> heldRow = new ArrayList<>();

    Scenarios(Fit fit, String varied) {
        this.fit = fit;
        this.varied = varied;
        for (String name : fit.covariates()) {
            if (!name.equals(varied)) {
                hold(name, fit.isNumberIn(name));
            }
        }
        fit.offset().ifPresent(name -> hold(name, true));
    }

    /** Returns scenarios at the given numbers of the varied covariate. */
    Table at(double[] values) {
        return with(NumberColumn.of(varied, values));
    }

    /** Returns one scenario for each of the given rows' values of the varied covariate. */
    Table atRows(int[] rows) {
        return with(fit.table().column(varied).rows(rows));
    }

    /** Returns a sentence on what is held where; empty if there is no other covariate. */
    String sentence() {
        return held.isEmpty() ? "" : " Other covariates are held at " + String.join(", ", held) + ".";
    }

    /** Returns a value for a caption: whole numbers as they are, since 2014 may be a year; others without false precision. */
    static String value(double value) {
        return value == Math.rint(value) ? NumberColumn.of("", value).text(0) : Numbers.compact(value);
    }

    private Table with(Column variedColumn) {
        List<Column> columns = new ArrayList<>();
        columns.add(variedColumn);
        for (Column column : heldRow) {
            columns.add(column.rows(new int[variedColumn.size()]));
        }
        return Table.of(columns.toArray(new Column[0]));
    }

    private void hold(String name, boolean number) {
        Column column = fit.table().column(name);
        int row = number && column instanceof NumberColumn numbers ? medianRow(numbers) : mostFrequentRow(column);
        Column one = column.rows(new int[] {row});
        heldRow.add(one);
        held.add(name + " = " + (one instanceof NumberColumn numbers ? value(numbers.value(0)) : one.text(0))
                + (number ? " (median)" : " (most rows)"));
    }

    private static int medianRow(NumberColumn column) {
        Integer[] order = new Integer[column.size()];
        Arrays.setAll(order, i -> i);
        Arrays.sort(order, Comparator.comparingDouble(column::value));
        return order[(order.length - 1) / 2];
    }

    private static int mostFrequentRow(Column column) {
        return Groups.byValue(column).stream()
                .max(Comparator.comparingInt(Groups.Group::size)
                        .thenComparing(Groups.Group::name, Comparator.reverseOrder()))
                .orElseThrow(() -> new IllegalArgumentException(
                        "there is nothing to draw: column '" + column.name() + "' has no value in the rows used."))
                .firstRow();
    }
}
