package countwright.kernel.cell;

/**
 * The code of a cell and how the cell is called in messages.
 *
 * @param name such as "cell [3]"
 */
record CellText(String name, String code) {

    /** A place in a cell; line and column count from 1. */
    record Place(int line, int column) {}

    Place placeOf(int position) {
        int bounded = Math.max(0, Math.min(position, code.length()));
        int line = 1;
        int lineStart = 0;
        for (int i = 0; i < bounded; i++) {
            if (code.charAt(i) == '\n') {
                line++;
                lineStart = i + 1;
            }
        }
        return new Place(line, bounded - lineStart + 1);
    }

    /** Returns a line, counted from 1, or an empty text where there is none. */
    String line(int number) {
        String[] lines = code.split("\n", -1);
        return number >= 1 && number <= lines.length ? lines[number - 1] : "";
    }
}
