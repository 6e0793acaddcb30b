package countwright.model;

import countwright.design.InteractionTerm;
import countwright.design.LinearTerm;
import countwright.design.Term;
import countwright.table.Column;
import countwright.table.NumberColumn;
import countwright.table.Table;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import java.util.function.DoublePredicate;

/**
 * The rows of a table that a model can use, checked: no value that the model reads is missing, counts are whole and at least
 * 0, exposures above 0, numbers finite. Rows with a missing value are left out and accounted for; any other fault is the
 * user's to mend and is thrown.
 */
final class UsedRows {

    /** Beyond these, products of three such numbers and their sums over rows leave the range of a double. */
    private static final double LARGEST = 1e50;

    private static final double LARGEST_EXPOSURE = 1e100;
    private static final double LARGEST_OFFSET = 230;

    private final Table table;
    private final Optional<String> leftOut;

    private UsedRows(Table table, Optional<String> leftOut) {
        this.table = table;
        this.leftOut = leftOut;
    }

    /**
     * Returns the rows that a model can use.
     *
     * @throws IllegalArgumentException if a column is unknown or of the wrong kind, a value is not permitted, or no row is
     *     left
     */
    static UsedRows of(CountModel model, Table table) {
        if (table.rowCount() == 0) {
            throw new IllegalArgumentException("a fit needs rows, but " + table.source() + " has none.");
        }
        NumberColumn counts = numbers(table, model.response(), "the response", "counts");
        Optional<NumberColumn> exposures =
                model.exposure().map(name -> numbers(table, name, "the exposure", "amounts"));
        Optional<NumberColumn> offsets = model.offset().map(name -> numbers(table, name, "the offset", "logarithms"));
        List<Column> needed = needed(model, table);
        boolean[] complete = complete(needed, table.rowCount());
        Checks checks = new Checks(table, complete);
        checks.all(counts, Double::isFinite, "but counts are finite whole numbers. Correct or leave out the row.");
        checks.all(
                counts,
                y -> y >= 0,
                "but a count cannot be negative. Correct the row, or leave it out with table.where"
                        + "(row -> row.number(\"" + counts.name() + "\") >= 0).");
        checks.all(
                counts,
                y -> y == Math.rint(y),
                "but counts are whole numbers. If the column holds rates, model the count"
                        + " behind them and give the amount it was counted over as exposure.");
        exposures.ifPresent(column -> checks.all(
                column,
                e -> e > 0 && e < Double.POSITIVE_INFINITY,
                "but exposure must be positive and finite. Correct the row, or leave it out with table.where(row -> row.number"
                        + "(\"" + column.name()
                        + "\") > 0). If the column is on the log scale, pass it to offset(…)."));
        exposures.ifPresent(column -> checks.all(
                column,
                e -> e >= 1 / LARGEST_EXPOSURE && e <= LARGEST_EXPOSURE,
                "but exposures lie from 1e-100 to 1e100. Give them in another unit."));
        offsets.ifPresent(column -> checks.all(
                column,
                o -> Math.abs(o) <= LARGEST_OFFSET,
                "but an offset is on the log scale and lies from -230 to 230. If the column holds amounts, pass it to"
                        + " exposure(…)."));
        for (String name : linearColumns(model.terms())) {
            if (table.column(name) instanceof NumberColumn numbers) {
                checks.all(
                        numbers,
                        x -> Math.abs(x) <= LARGEST,
                        "but linear(\"" + name
                                + "\") needs finite numbers of at most 1e50 in size. Correct or leave out the"
                                + " row, or give the column in another unit.");
            }
        }
        return keeping(table, complete, needed);
    }

    /** Returns the table of the rows used. */
    Table table() {
        return table;
    }

    /** Returns a sentence on the rows left out, if any were. */
    Optional<String> leftOut() {
        return leftOut;
    }

    private static UsedRows keeping(Table table, boolean[] complete, List<Column> needed) {
        int[] kept = new int[complete.length];
        int count = 0;
        for (int row = 0; row < complete.length; row++) {
            if (complete[row]) {
                kept[count++] = row;
            }
        }
        if (count == complete.length) {
            return new UsedRows(table, Optional.empty());
        }
        List<String> counts = new ArrayList<>();
        for (Column column : needed) {
            if (column.missingCount() > 0) {
                counts.add(column.name() + " (" + column.missingCount() + ")");
            }
        }
        if (count == 0) {
            throw new IllegalArgumentException("no row of " + table.source()
                    + " has all the values the model needs; missing are " + String.join(", ", counts) + ".");
        }
        int left = complete.length - count;
        String sentence = left + " of " + complete.length + (left == 1 ? " rows was" : " rows were")
                + " left out because values are missing: " + String.join(", ", counts) + ".";
        return new UsedRows(table.rows(Arrays.copyOf(kept, count)), Optional.of(sentence));
    }

    private static boolean[] complete(List<Column> needed, int rowCount) {
        boolean[] complete = new boolean[rowCount];
        Arrays.fill(complete, true);
        for (Column column : needed) {
            for (int row = 0; row < rowCount; row++) {
                complete[row] &= !column.isMissing(row);
            }
        }
        return complete;
    }

    private static List<Column> needed(CountModel model, Table table) {
        Set<String> names = new LinkedHashSet<>();
        names.add(model.response());
        model.exposure().ifPresent(names::add);
        model.offset().ifPresent(names::add);
        model.exposure().ifPresent(name -> refuseResponse(model, name, "exposure"));
        model.offset().ifPresent(name -> refuseResponse(model, name, "offset"));
        for (Term term : model.terms()) {
            names.addAll(term.columns());
            if (term.columns().contains(model.response())) {
                throw new IllegalArgumentException(
                        "'" + model.response() + "' is the response and cannot explain itself; take it out of on(…).");
            }
        }
        return names.stream().map(table::column).toList();
    }

    private static void refuseResponse(CountModel model, String name, String role) {
        if (name.equals(model.response())) {
            throw new IllegalArgumentException("'" + name + "' is the response and cannot be its own " + role
                    + "; name the column of the amounts over which the counts were collected.");
        }
    }

    private static Set<String> linearColumns(List<Term> terms) {
        Set<String> names = new LinkedHashSet<>();
        for (Term term : terms) {
            if (term instanceof InteractionTerm both) {
                names.addAll(linearColumns(List.of(both.first(), both.second())));
            } else if (term instanceof LinearTerm linear) {
                names.add(linear.column());
            }
        }
        return names;
    }

    private static NumberColumn numbers(Table table, String name, String role, String content) {
        Column column = table.column(name);
        if (column instanceof NumberColumn numbers) {
            return numbers;
        }
        throw new IllegalArgumentException(
                role + " '" + name + "' in " + table.source() + " holds " + column.kind() + ", but " + content
                        + " are numbers. Choose a column of numbers, or mend the values that keep it from being read as numbers.");
    }

    /** Checks the values of columns in the complete rows. */
    private static final class Checks {

        private final Table table;
        private final boolean[] complete;

        Checks(Table table, boolean[] complete) {
            this.table = table;
            this.complete = complete;
        }

        void all(NumberColumn column, DoublePredicate permitted, String rule) {
            int first = -1;
            int faults = 0;
            for (int row = 0; row < column.size(); row++) {
                if (complete[row] && !permitted.test(column.value(row))) {
                    first = first < 0 ? row : first;
                    faults++;
                }
            }
            if (faults > 0) {
                String more = faults == 1 ? "" : " (and " + (faults - 1) + " more like it)";
                throw new IllegalArgumentException("row " + (first + 1) + " of column '" + column.name() + "' in "
                        + table.source() + " is " + column.text(first) + more + ", " + rule);
            }
        }
    }
}
