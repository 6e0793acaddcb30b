package countwright.table;

/** A column of numbers, held as doubles; a missing value is NaN. */
public final class NumberColumn implements Column {

    private final String name;
    private final double[] values;

    private NumberColumn(String name, double[] values) {
        this.name = name;
        this.values = values;
    }

    /** Returns a column of the given numbers (copied); NaN marks a missing value. */
    public static NumberColumn of(String name, double... values) {
        return new NumberColumn(name, values.clone());
    }

    /** Returns a column that keeps the array it is given; for readers that make an array and never touch it again. */
    static NumberColumn keeping(String name, double[] values) {
        return new NumberColumn(name, values);
    }

    /** Returns the number in a row, or NaN where it is missing. */
    public double value(int row) {
        return values[row];
    }

    /** Returns a copy of all numbers. */
    public double[] toArray() {
        return values.clone();
    }

    /** Copies {@code length} numbers, starting at a row, into an array. */
    public void copyTo(int firstRow, double[] target, int targetStart, int length) {
        System.arraycopy(values, firstRow, target, targetStart, length);
    }

    @Override
    public String name() {
        return name;
    }

    @Override
    public int size() {
        return values.length;
    }

    @Override
    public boolean isMissing(int row) {
        return Double.isNaN(values[row]);
    }

    /** Returns the shortest text that reads back as the same number, without ".0" on whole numbers. */
    @Override
    public String text(int row) {
        double value = values[row];
        if (Double.isNaN(value)) {
            return "";
        }
        if (value == Math.rint(value) && Math.abs(value) < 1e15) {
            return Long.toString((long) value);
        }
        return Double.toString(value);
    }

    @Override
    public String kind() {
        return "numbers";
    }

    @Override
    public NumberColumn named(String newName) {
        return new NumberColumn(newName, values);
    }

    @Override
    public NumberColumn rows(int[] rows) {
        double[] chosen = new double[rows.length];
        for (int i = 0; i < rows.length; i++) {
            chosen[i] = values[rows[i]];
        }
        return new NumberColumn(name, chosen);
    }

    @Override
    public String toString() {
        return name + ": " + values.length + " numbers";
    }
}
