package countwright.show;

import java.util.ArrayList;
import java.util.List;

/** Sets a grid as aligned lines for a fixed-width font. */
final class GridText {

    private static final String GAP = "   ";
    private static final int WIDEST_CELL = 60;

    private final Grid grid;
    private final int[] widths;

    private GridText(Grid grid) {
        this.grid = grid;
        this.widths = new int[grid.headings().size()];
        for (int column = 0; column < widths.length; column++) {
            Grid.Heading heading = grid.headings().get(column);
            widths[column] = Math.max(TextWidth.of(clean(heading.text())), TextWidth.of(clean(heading.below())));
        }
        grid.firstRows().forEach(this::widen);
        grid.lastRows().forEach(this::widen);
    }

    static String of(Grid grid) {
        return String.join("\n", new GridText(grid).lines());
    }

    private List<String> lines() {
        List<String> lines = new ArrayList<>();
        if (!grid.caption().isEmpty()) {
            lines.add(grid.caption());
        }
        if (widths.length > 0) {
            String rule = "─".repeat(totalWidth());
            if (!grid.caption().isEmpty()) {
                lines.add(rule);
            }
            lines.add(line(grid.headings().stream().map(Grid.Heading::text).toList()));
            if (grid.headings().stream().anyMatch(heading -> !heading.below().isEmpty())) {
                lines.add(line(grid.headings().stream().map(Grid.Heading::below).toList()));
            }
            lines.add(rule);
            grid.firstRows().forEach(row -> lines.add(line(row)));
            if (grid.leftOut() > 0) {
                lines.add("⋮  " + leftOut(grid));
            }
            grid.lastRows().forEach(row -> lines.add(line(row)));
            lines.add(rule);
        }
        lines.addAll(grid.notes());
        return lines;
    }

    static String leftOut(Grid grid) {
        return Numbers.count(grid.leftOut(), "row") + " not shown";
    }

    /** Returns a cell on one line: line breaks and tabs as visible signs, other control characters dropped. */
    static String clean(String cell) {
        if (cell.chars().noneMatch(Character::isISOControl)) {
            return cell;
        }
        StringBuilder oneLine = new StringBuilder();
        cell.replace("\r\n", "\n").codePoints().forEach(c -> {
            if (c == '\n' || c == '\r') {
                oneLine.append('↵');
            } else if (c == '\t') {
                oneLine.append('⇥');
            } else if (!Character.isISOControl(c)) {
                oneLine.appendCodePoint(c);
            }
        });
        return oneLine.toString();
    }

    private void widen(List<String> row) {
        for (int column = 0; column < widths.length; column++) {
            int width = Math.min(WIDEST_CELL, TextWidth.of(clean(row.get(column))));
            widths[column] = Math.max(widths[column], width);
        }
    }

    private int totalWidth() {
        int total = GAP.length() * (widths.length - 1);
        for (int width : widths) {
            total += width;
        }
        return total;
    }

    private String line(List<String> cells) {
        StringBuilder line = new StringBuilder();
        for (int column = 0; column < widths.length; column++) {
            String cell = TextWidth.clipped(clean(cells.get(column)), Math.max(widths[column], 1));
            String padding = " ".repeat(Math.max(0, widths[column] - TextWidth.of(cell)));
            boolean right = grid.headings().get(column).align() == Grid.Align.RIGHT;
            line.append(column == 0 ? "" : GAP)
                    .append(right ? padding : "")
                    .append(cell)
                    .append(right ? "" : padding);
        }
        return line.toString().stripTrailing();
    }
}
