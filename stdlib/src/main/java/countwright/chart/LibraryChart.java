package countwright.chart;

import java.awt.Color;
import org.knowm.xchart.XYChart;
import org.knowm.xchart.style.Styler.LegendPosition;
import org.knowm.xchart.style.XYStyler;

/** A figure as a chart that the library draws alone, with its own axes, titles and legend, in our fonts and colours. */
final class LibraryChart {

    /** Of longer labels the library thinks that they never fit. */
    private static final int LONGEST_LABEL = 20;

    private LibraryChart() {}

    static XYChart of(Figure figure, Layout layout) {
        XYChart chart = new XYChart(Style.WIDTH, Math.max(Style.HEIGHT, layout.height()));
        chart.setTitle(literal(figure.title()));
        chart.setXAxisTitle(literal(figure.x().title()));
        chart.setYAxisTitle(literal(figure.y().title()));
        XYStyler styler = chart.getStyler();
        styler.setBaseFont(Style.label());
        styler.setChartTitleFont(Style.title());
        styler.setAxisTitleFont(Style.axisTitle());
        styler.setAxisTickLabelsFont(Style.label());
        styler.setLegendFont(Style.label());
        styler.setChartBackgroundColor(Style.BACKGROUND);
        styler.setPlotBackgroundColor(Style.BACKGROUND);
        styler.setPlotBorderColor(Style.GRID);
        styler.setPlotGridLinesColor(Style.GRID);
        styler.setLegendPosition(LegendPosition.OutsideS);
        styler.setLegendBorderColor(new Color(255, 255, 255, 0));
        Painter painter = new Painter(figure, layout);
        painter.setRanges(styler);
        painter.addLayers(chart);
        if (!figure.rows().isEmpty()) {
            styler.setYAxisTickMarkSpacingHint(14);
            chart.setCustomYAxisTickLabelsFormatter(value -> rowName(figure, value));
        }
        return chart;
    }

    /** Returns the name at a height; between rows blanks that differ, since the library drops an axis of equal labels. */
    private static String rowName(Figure figure, double value) {
        int rows = figure.rows().size();
        int row = rows - (int) Math.rint(value);
        if (Math.abs(value - Math.rint(value)) > 1e-9 || row < 0 || row >= rows) {
            return value < 1 ? " " : "  ";
        }
        String name = figure.rows().get(row).name().replaceAll("\\p{Cntrl}", " ");
        boolean fits = name.codePointCount(0, name.length()) < LONGEST_LABEL;
        return literal(fits ? name : name.substring(0, name.offsetByCodePoints(0, LONGEST_LABEL - 2)) + "\u2026");
    }

    /** A text that starts with a dollar would be taken for a formula. */
    private static String literal(String text) {
        return text.startsWith("$") ? "\u00a0" + text : text;
    }
}
