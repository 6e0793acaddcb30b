package countwright.table;

import java.util.Arrays;
import java.util.List;
import java.util.TreeSet;
import org.jspecify.annotations.Nullable;

/**
 * A column of text, held as codes into its sorted distinct values (its levels). True/false values are read as the
 * levels "false" and "true".
 */
public final class TextColumn implements Column {

    /** The code of a missing value. */
    public static final int MISSING = -1;

    private final String name;
    private final List<String> levels;
    private final int[] codes;

    private TextColumn(String name, List<String> levels, int[] codes) {
        this.name = name;
        this.levels = levels;
        this.codes = codes;
    }

    /** Returns a column of the given texts; null marks a missing value. */
    public static TextColumn of(String name, @Nullable String... values) {
        TreeSet<String> distinct = new TreeSet<>();
        for (String value : values) {
            if (value != null) {
                distinct.add(value);
            }
        }
        List<String> levels = List.copyOf(distinct);
        String[] sorted = levels.toArray(new String[0]);
        int[] codes = new int[values.length];
        for (int row = 0; row < codes.length; row++) {
            String value = values[row];
            codes[row] = value == null ? MISSING : Arrays.binarySearch(sorted, value);
        }
        return new TextColumn(name, levels, codes);
    }

    /** Returns a column that keeps the codes it is given; levels must be distinct and sorted, codes in range. */
    static TextColumn keeping(String name, List<String> levels, int[] codes) {
        return new TextColumn(name, List.copyOf(levels), codes);
    }

    /** Returns the distinct values in ascending order; a level may have no row left after rows were chosen. */
    public List<String> levels() {
        return levels;
    }

    /** Returns the position in {@link #levels} of the value in a row, or {@link #MISSING}. */
    public int code(int row) {
        return codes[row];
    }

    @Override
    public String name() {
        return name;
    }

    @Override
    public int size() {
        return codes.length;
    }

    @Override
    public boolean isMissing(int row) {
        return codes[row] == MISSING;
    }

    @Override
    public String text(int row) {
        return codes[row] == MISSING ? "" : levels.get(codes[row]);
    }

    @Override
    public String kind() {
        return "text";
    }

    @Override
    public TextColumn named(String newName) {
        return new TextColumn(newName, levels, codes);
    }

    @Override
    public TextColumn rows(int[] rows) {
        int[] chosen = new int[rows.length];
        for (int i = 0; i < rows.length; i++) {
            chosen[i] = codes[rows[i]];
        }
        return new TextColumn(name, levels, chosen);
    }

    @Override
    public String toString() {
        return name + ": " + codes.length + " texts, " + levels.size() + " levels";
    }
}
