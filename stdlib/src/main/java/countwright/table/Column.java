package countwright.table;

/** A named, immutable sequence of values of one type, some of which may be missing. Rows count from 0. */
public sealed interface Column permits NumberColumn, TextColumn, DateColumn, DateTimeColumn {

    /** Returns the name, unique in its table. */
    String name();

    /** Returns the number of rows. */
    int size();

    /** Returns whether the value in a row is missing. */
    boolean isMissing(int row);

    /** Returns the value as short text, or an empty text where it is missing. */
    String text(int row);

    /** Returns the word for the type in messages: "numbers", "text", "dates" or "date-times". */
    String kind();

    /** Returns the same column under another name. */
    Column named(String newName);

    /** Returns a column of the given rows, in the given order. */
    Column rows(int[] rows);

    /** Returns how many values are missing. */
    default int missingCount() {
        int count = 0;
        for (int row = 0; row < size(); row++) {
            if (isMissing(row)) {
                count++;
            }
        }
        return count;
    }
}
