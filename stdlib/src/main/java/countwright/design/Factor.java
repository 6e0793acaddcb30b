package countwright.design;

import countwright.show.NearNames;
import countwright.table.Column;
import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.util.Arrays;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.TreeSet;
import java.util.stream.IntStream;

/**
 * A factor as learned from the table a model was fitted to: its levels in ascending order, numbers by size, and the one
 * the others are compared with. Immutable.
 */
public final class Factor {

    private final String column;
    private final List<String> levels;
    private final int reference;

    private Factor(String column, List<String> levels, int reference) {
        this.column = column;
        this.levels = List.copyOf(levels);
        this.reference = reference;
    }

    /**
     * Returns the factor in a column of a table.
     *
     * @throws IllegalArgumentException if the column is unknown or has a single level, or the reference is not a level
     */
    static Factor learn(String name, Optional<String> chosenReference, Table table) {
        List<String> levels = levelsOf(table.column(name));
        if (levels.size() < 2) {
            throw new IllegalArgumentException("levels(\"" + name + "\") has nothing to compare: every row used is '"
                    + levels.get(0) + "'. Leave the term out, or use rows with other levels too.");
        }
        int reference = chosenReference.map(levels::indexOf).orElse(0);
        if (reference < 0) {
            String wanted = chosenReference.orElseThrow();
            throw new IllegalArgumentException("levels(\"" + name + "\") has no level '" + wanted
                    + "' to be the reference in the rows used; its levels are " + NearNames.list(levels) + "."
                    + question(wanted, levels));
        }
        return new Factor(name, levels, reference);
    }

    /** Returns the name of the column. */
    public String column() {
        return column;
    }

    /** Returns the levels, in ascending order, as the table shows them. */
    public List<String> levels() {
        return levels;
    }

    /** Returns the level the others are compared with. */
    public String reference() {
        return levels.get(reference);
    }

    /** Returns the position of the reference among the levels. */
    public int referenceIndex() {
        return reference;
    }

    /**
     * Returns the position among {@link #levels} of the value in each row of a table.
     *
     * @throws IllegalArgumentException if the column is unknown, or a value is missing or not a level
     */
    public int[] codes(Table table) {
        Column values = table.column(column);
        int[] codes = new int[values.size()];
        Map<String, Integer> positions = new HashMap<>();
        for (int level = 0; level < levels.size(); level++) {
            positions.put(levels.get(level), level);
        }
        if (values instanceof TextColumn texts) {
            int[] byTextCode = new int[texts.levels().size()];
            for (int code = 0; code < byTextCode.length; code++) {
                byTextCode[code] = positions.getOrDefault(texts.levels().get(code), -1);
            }
            for (int row = 0; row < codes.length; row++) {
                int code = texts.code(row);
                codes[row] = code == TextColumn.MISSING ? -1 : byTextCode[code];
            }
        } else {
            // A number becomes text once for each distinct value, not once for each row.
            Map<Object, Integer> seen = new HashMap<>();
            for (int row = 0; row < codes.length; row++) {
                Object key = values instanceof NumberColumn numbers ? numbers.value(row) + 0.0 : values.text(row);
                int at = row;
                codes[row] = seen.computeIfAbsent(key, k -> positions.getOrDefault(levelText(values, at), -1));
            }
        }
        for (int row = 0; row < codes.length; row++) {
            if (codes[row] < 0) {
                throw unknown(table, values, row);
            }
        }
        return codes;
    }

    /** Returns the text of a number used as a level: as a table shows it, and 0 for -0. */
    static String levelText(double level) {
        return NumberColumn.of("level", level + 0.0).text(0);
    }

    private static String levelText(Column values, int row) {
        return values instanceof NumberColumn numbers ? levelText(numbers.value(row)) : values.text(row);
    }

    private static List<String> levelsOf(Column values) {
        if (values instanceof TextColumn texts) {
            boolean[] present = new boolean[texts.levels().size()];
            for (int row = 0; row < texts.size(); row++) {
                if (!texts.isMissing(row)) {
                    present[texts.code(row)] = true;
                }
            }
            return IntStream.range(0, present.length)
                    .filter(code -> present[code])
                    .mapToObj(texts.levels()::get)
                    .toList();
        }
        if (values instanceof NumberColumn numbers) {
            return Arrays.stream(numbers.toArray())
                    .filter(value -> !Double.isNaN(value))
                    .map(value -> value + 0.0)
                    .distinct()
                    .sorted()
                    .mapToObj(Factor::levelText)
                    .toList();
        }
        TreeSet<String> texts = new TreeSet<>();
        for (int row = 0; row < values.size(); row++) {
            if (!values.isMissing(row)) {
                texts.add(values.text(row));
            }
        }
        return List.copyOf(texts);
    }

    private static String question(String given, List<String> levels) {
        String question = NearNames.question(given, levels);
        return question.isEmpty() ? "" : " " + question;
    }

    private IllegalArgumentException unknown(Table table, Column values, int row) {
        String place = "row " + (row + 1) + " of column '" + column + "' in " + table.source();
        if (values.isMissing(row)) {
            return new IllegalArgumentException(place + " is missing, but the model needs a level there: "
                    + NearNames.list(levels) + ". Fill it in, or leave the row out.");
        }
        String given = levelText(values, row);
        return new IllegalArgumentException(place + " is '" + given
                + "', a level the model was not fitted to; it knows " + NearNames.list(levels) + "."
                + question(given, levels));
    }

    @Override
    public String toString() {
        return column + ": " + levels.size() + " levels, reference " + reference();
    }
}
