package countwright.show;

import java.util.ArrayList;
import java.util.List;

/**
 * A small table of already formatted cells that shows itself as aligned text and as HTML.
 *
 * <p>Cells are plain text; escaping is done here. Immutable; each method returns a new grid.
 */
public final class Grid implements Displayable {

    /** How the cells of a column are set. */
    public enum Align {
        LEFT,
        RIGHT
    }

    private record Heading(String text, Align align) {}

    private final String caption;
    private final List<Heading> headings;
    private final List<List<String>> rows;
    private final List<String> notes;

    private Grid(String caption, List<Heading> headings, List<List<String>> rows, List<String> notes) {
        this.caption = caption;
        this.headings = headings;
        this.rows = rows;
        this.notes = notes;
    }

    /** Returns an empty grid; an empty caption shows nothing. */
    public static Grid titled(String caption) {
        return new Grid(caption, List.of(), List.of(), List.of());
    }

    /** Returns this grid with a column of text, set left. */
    public Grid textColumn(String heading) {
        return new Grid(caption, plus(headings, new Heading(heading, Align.LEFT)), rows, notes);
    }

    /** Returns this grid with a column of numbers, set right. */
    public Grid numberColumn(String heading) {
        return new Grid(caption, plus(headings, new Heading(heading, Align.RIGHT)), rows, notes);
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
        return new Grid(caption, headings, plus(rows, List.of(cells)), notes);
    }

    /** Returns this grid with a line of text below it. */
    public Grid note(String line) {
        return new Grid(caption, headings, rows, plus(notes, line));
    }

    @Override
    public MimeBundle display() {
        return MimeBundle.text(toString());
    }

    @Override
    public String toString() {
        return caption + headings + rows + notes;
    }

    private static <T> List<T> plus(List<T> list, T element) {
        List<T> longer = new ArrayList<>(list);
        longer.add(element);
        return List.copyOf(longer);
    }
}
