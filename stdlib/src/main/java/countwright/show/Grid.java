package countwright.show;

import java.util.ArrayList;
import java.util.List;

/**
 * A small table of already formatted cells that shows itself as aligned text and as HTML.
 *
 * <p>Cells are plain text; escaping is done here. A grid of more rows than it may show leaves out its middle and says how
 * many rows that is; see {@link #showing}. Immutable; each method returns a new grid.
 */
public final class Grid implements Displayable {

    /** How the cells of a column are set. */
    public enum Align {
        LEFT,
        RIGHT
    }

    record Heading(String text, String below, Align align) {}

    private static final int HEAD = 40;
    private static final int TAIL = 10;

    private final String caption;
    private final List<Heading> headings;
    private final List<List<String>> rows;
    private final List<String> notes;
    private final int head;
    private final int tail;

    private Grid(
            String caption, List<Heading> headings, List<List<String>> rows, List<String> notes, int head, int tail) {
        this.caption = caption;
        this.headings = headings;
        this.rows = rows;
        this.notes = notes;
        this.head = head;
        this.tail = tail;
    }

    /** Returns an empty grid; an empty caption shows nothing. */
    public static Grid titled(String caption) {
        return new Grid(caption, List.of(), List.of(), List.of(), HEAD, TAIL);
    }

    /** Returns this grid with a column of text, set left. */
    public Grid textColumn(String heading) {
        return textColumn(heading, "");
    }

    /** Returns this grid with a column of text, with a smaller second line (a unit, a type) below its heading. */
    public Grid textColumn(String heading, String below) {
        return column(new Heading(heading, below, Align.LEFT));
    }

    /** Returns this grid with a column of numbers, set right. */
    public Grid numberColumn(String heading) {
        return numberColumn(heading, "");
    }

    /** Returns this grid with a column of numbers, with a smaller second line (a unit, a type) below its heading. */
    public Grid numberColumn(String heading, String below) {
        return column(new Heading(heading, below, Align.RIGHT));
    }

    private Grid column(Heading heading) {
        if (!rows.isEmpty()) {
            throw new IllegalStateException("the columns of a grid come before its rows, but '" + heading.text()
                    + "' was added after " + Numbers.count(rows.size(), "row") + ".");
        }
        return new Grid(caption, plus(headings, heading), rows, notes, head, tail);
    }

    /**
     * Returns this grid with one more row.
     *
     * @throws IllegalArgumentException if the number of cells differs from the number of columns
     */
    public Grid row(String... cells) {
        if (cells.length != headings.size()) {
            throw new IllegalArgumentException(
                    "a row has " + cells.length + " cells where the grid has " + headings.size() + " columns.");
        }
        return new Grid(caption, headings, plus(rows, List.of(cells)), notes, head, tail);
    }

    /**
     * Returns this grid with more rows, in order; for many rows this is faster than {@link #row} again and again.
     *
     * @throws IllegalArgumentException if the number of cells of a row differs from the number of columns
     */
    public Grid rows(List<List<String>> moreRows) {
        List<List<String>> longer = new ArrayList<>(rows);
        for (List<String> cells : moreRows) {
            if (cells.size() != headings.size()) {
                throw new IllegalArgumentException(
                        "a row has " + cells.size() + " cells where the grid has " + headings.size() + " columns.");
            }
            longer.add(List.copyOf(cells));
        }
        return new Grid(caption, headings, List.copyOf(longer), notes, head, tail);
    }

    /** Returns this grid with a line of text below it. */
    public Grid note(String line) {
        return new Grid(caption, headings, rows, plus(notes, line), head, tail);
    }

    /**
     * Returns this grid showing at most some first and some last rows (40 and 10 if not said otherwise).
     *
     * @throws IllegalArgumentException if a number is negative
     */
    public Grid showing(int firstRows, int lastRows) {
        if (firstRows < 0 || lastRows < 0) {
            throw new IllegalArgumentException("a grid shows 0 or more rows at each end, but was asked for " + firstRows
                    + " first and " + lastRows + " last.");
        }
        return new Grid(caption, headings, rows, notes, firstRows, lastRows);
    }

    /** Returns this grid showing every row. */
    public Grid showingAll() {
        return new Grid(caption, headings, rows, notes, Integer.MAX_VALUE, 0);
    }

    String caption() {
        return caption;
    }

    List<Heading> headings() {
        return headings;
    }

    List<String> notes() {
        return notes;
    }

    List<List<String>> firstRows() {
        return leftOut() == 0 ? rows : rows.subList(0, head);
    }

    List<List<String>> lastRows() {
        return leftOut() == 0 ? List.of() : rows.subList(rows.size() - tail, rows.size());
    }

    int leftOut() {
        return (int) Math.max(0, rows.size() - (long) head - tail);
    }

    @Override
    public MimeBundle display() {
        return MimeBundle.text(GridText.of(this)).withHtml(GridHtml.of(this));
    }

    @Override
    public String toString() {
        return GridText.of(this);
    }

    private static <T> List<T> plus(List<T> list, T element) {
        List<T> longer = new ArrayList<>(list);
        longer.add(element);
        return List.copyOf(longer);
    }
}
