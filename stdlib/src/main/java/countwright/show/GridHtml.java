package countwright.show;

import java.util.List;

/**
 * Sets a grid as an HTML table.
 *
 * <p>All style stands in style attributes, since front ends remove style elements from output they do not trust, and
 * there is no script. Colours are inherited and rules are half transparent, so that the table reads on any background. A
 * front end's own stripes are switched off row by row: they are made for one theme and fight with the other.
 */
final class GridHtml {

    private static final String RULE = "rgba(128,128,128,0.55)";
    private static final String HAIRLINE = "rgba(128,128,128,0.22)";

    private static final String FRAME = "overflow-x:auto;max-width:100%;margin:0.5em 0 1.1em 0";
    private static final String TABLE = "border-collapse:collapse;border:none;margin:0;width:auto;table-layout:auto;"
            + "background:transparent;color:inherit;font-size:0.95em;line-height:1.4;font-variant-numeric:tabular-nums";
    private static final String CAPTION =
            "caption-side:top;text-align:left;font-weight:600;color:inherit;padding:0 0.7em 0.4em 0.7em";
    private static final String ROW = "background:transparent;break-inside:avoid";
    private static final String CELL =
            "padding:0.24em 0.7em;border:none;vertical-align:top;color:inherit;background:transparent;";
    private static final String TEXT_CELL = CELL + "text-align:left;max-width:32em;overflow-wrap:break-word;";
    private static final String NUMBER_CELL = CELL + "text-align:right;white-space:nowrap;";
    private static final String NOTE = "font-size:0.9em;opacity:0.8;max-width:48em;padding:0.3em 0.7em 0 0.7em";

    /** Short cells, dates among them, are not broken; long ones may be, so that a wide grid still prints whole. */
    private static final int KEPT_ON_ONE_LINE = 12;

    private GridHtml() {}

    static String of(Grid grid) {
        StringBuilder html = new StringBuilder();
        html.append("<div style=\"").append(FRAME).append("\">\n");
        if (grid.headings().isEmpty()) {
            if (!grid.caption().isEmpty()) {
                html.append("<div style=\"font-weight:600;padding:0 0.7em\">")
                        .append(Html.escape(grid.caption()))
                        .append("</div>\n");
            }
        } else {
            table(grid, html);
        }
        for (String note : grid.notes()) {
            html.append("<div style=\"")
                    .append(NOTE)
                    .append("\">")
                    .append(Html.escape(note))
                    .append("</div>\n");
        }
        return html.append("</div>").toString();
    }

    private static void table(Grid grid, StringBuilder html) {
        html.append("<table style=\"").append(TABLE).append("\">\n");
        if (!grid.caption().isEmpty()) {
            html.append("<caption style=\"")
                    .append(CAPTION)
                    .append("\">")
                    .append(Html.escape(grid.caption()))
                    .append("</caption>\n");
        }
        html.append("<thead>\n<tr style=\"").append(ROW).append("\">");
        for (Grid.Heading heading : grid.headings()) {
            html.append("<th scope=\"col\" style=\"")
                    .append(cell(heading))
                    .append("font-weight:600;vertical-align:bottom;border-top:1px solid ")
                    .append(RULE)
                    .append(";border-bottom:1px solid ")
                    .append(RULE)
                    .append("\">")
                    .append(Html.escape(GridText.clean(heading.text())));
            if (!heading.below().isEmpty()) {
                html.append("<br><span style=\"font-weight:normal;font-size:0.85em;opacity:0.75\">")
                        .append(Html.escape(GridText.clean(heading.below())))
                        .append("</span>");
            }
            html.append("</th>");
        }
        html.append("</tr>\n</thead>\n<tbody>\n");
        List<List<String>> first = grid.firstRows();
        List<List<String>> last = grid.lastRows();
        for (int i = 0; i < first.size(); i++) {
            boolean closes = i == first.size() - 1 && grid.leftOut() == 0;
            row(grid, first.get(i), closes ? RULE : HAIRLINE, html);
        }
        if (grid.leftOut() > 0) {
            html.append("<tr style=\"")
                    .append(ROW)
                    .append("\"><td colspan=\"")
                    .append(grid.headings().size())
                    .append("\" style=\"")
                    .append(CELL)
                    .append("text-align:left;opacity:0.75;font-style:italic;border-bottom:1px solid ")
                    .append(last.isEmpty() ? RULE : HAIRLINE)
                    .append("\">⋮ ")
                    .append(GridText.leftOut(grid))
                    .append("</td></tr>\n");
        }
        for (int i = 0; i < last.size(); i++) {
            row(grid, last.get(i), i == last.size() - 1 ? RULE : HAIRLINE, html);
        }
        html.append("</tbody>\n</table>\n");
    }

    /** Appends a row; a first cell of text names its row, which screen readers announce with each number. */
    private static void row(Grid grid, List<String> cells, String ruleBelow, StringBuilder html) {
        html.append("<tr style=\"").append(ROW).append("\">");
        for (int column = 0; column < cells.size(); column++) {
            Grid.Heading heading = grid.headings().get(column);
            boolean namesRow = column == 0 && heading.align() == Grid.Align.LEFT;
            html.append(namesRow ? "<th scope=\"row\" style=\"" : "<td style=\"")
                    .append(cell(heading))
                    .append(TextWidth.of(cells.get(column)) <= KEPT_ON_ONE_LINE ? "white-space:nowrap;" : "")
                    .append(namesRow ? "font-weight:normal;" : "")
                    .append("border-bottom:1px solid ")
                    .append(ruleBelow)
                    .append("\">")
                    .append(Html.escape(GridText.clean(cells.get(column))))
                    .append(namesRow ? "</th>" : "</td>");
        }
        html.append("</tr>\n");
    }

    private static String cell(Grid.Heading heading) {
        return heading.align() == Grid.Align.RIGHT ? NUMBER_CELL : TEXT_CELL;
    }
}
