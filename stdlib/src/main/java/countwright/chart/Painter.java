package countwright.chart;

import java.awt.Color;
import java.awt.Graphics2D;
import java.awt.Rectangle;
import java.awt.RenderingHints;
import java.awt.Shape;
import java.awt.geom.AffineTransform;
import java.awt.geom.Line2D;
import java.awt.geom.Rectangle2D;
import org.knowm.xchart.XYChart;
import org.knowm.xchart.style.XYStyler;

/**
 * Draws a figure: paper, grid, texts and key by our own hand, the layers of the plot by the charting library.
 *
 * <p>The library's own axes and titles stay off because they leave out or cut labels that do not fit, and place ticks on
 * logarithmic axes at powers of ten only.
 */
final class Painter {

    private static final Color CLEAR = new Color(255, 255, 255, 0);

    private final Figure figure;
    private final Layout layout;

    Painter(Figure figure, Layout layout) {
        this.figure = figure;
        this.layout = layout;
    }

    void paint(Graphics2D g) {
        g.setRenderingHint(RenderingHints.KEY_ANTIALIASING, RenderingHints.VALUE_ANTIALIAS_ON);
        g.setRenderingHint(RenderingHints.KEY_STROKE_CONTROL, RenderingHints.VALUE_STROKE_PURE);
        g.setColor(Style.BACKGROUND);
        g.fill(new Rectangle2D.Double(0, 0, Style.WIDTH, layout.height()));
        paintGrid(g);
        paintGuides(g);
        paintLayers(g);
        for (Layout.Sample sample : layout.samples()) {
            paintSample(g, sample);
        }
        for (Layout.Word word : layout.words()) {
            g.setColor(word.color());
            g.fill(Lettering.outline(word.text(), word.font(), word.x(), word.baseline()));
        }
    }

    /** Returns the layers on a bare plot of the charting library, the axes' ranges set. */
    XYChart barePlot() {
        XYChart plot = new XYChart(layout.plot().width, layout.plot().height);
        XYStyler styler = plot.getStyler();
        styler.setChartBackgroundColor(CLEAR);
        styler.setPlotBackgroundColor(CLEAR);
        styler.setPlotBorderVisible(false);
        styler.setPlotGridLinesVisible(false);
        styler.setPlotContentSize(1.0);
        styler.setPlotMargin(0);
        styler.setChartPadding(0);
        styler.setChartTitleVisible(false);
        styler.setLegendVisible(false);
        styler.setAxisTitlesVisible(false);
        styler.setAxisTicksVisible(false);
        setRanges(styler);
        addLayers(plot);
        return plot;
    }

    void setRanges(XYStyler styler) {
        styler.setXAxisLogarithmic(figure.x().scale() == Axis.Scale.LOG);
        styler.setYAxisLogarithmic(figure.y().scale() == Axis.Scale.LOG);
        styler.setXAxisMin(figure.x().min());
        styler.setXAxisMax(figure.x().max());
        styler.setYAxisMin(figure.y().min());
        styler.setYAxisMax(figure.y().max());
    }

    void addLayers(XYChart plot) {
        int number = 0;
        for (Layer layer : figure.layers()) {
            number++;
            layer.addTo(plot, layer.name().isEmpty() ? "layer " + number : layer.name());
        }
    }

    private void paintGrid(Graphics2D g) {
        Rectangle plot = layout.plot();
        boolean named = !figure.rows().isEmpty();
        g.setStroke(Style.HAIRLINE);
        g.setColor(Style.GRID);
        for (Layout.Mark mark : layout.yMarks()) {
            g.draw(new Line2D.Double(plot.x, mark.position(), plot.getMaxX(), mark.position()));
        }
        g.setColor(named ? Style.GRID : Style.AXIS);
        double end = named ? plot.y : plot.getMaxY() + 4;
        for (Layout.Mark mark : layout.xMarks()) {
            g.draw(new Line2D.Double(mark.position(), plot.getMaxY(), mark.position(), end));
        }
        g.setColor(Style.AXIS);
        g.draw(new Line2D.Double(plot.x, plot.getMaxY(), plot.getMaxX(), plot.getMaxY()));
    }

    private void paintGuides(Graphics2D g) {
        Shape clip = g.getClip();
        g.clip(layout.plot());
        for (Figure.Guide guide : figure.guides()) {
            g.setColor(guide.ink().color());
            g.setStroke(guide.ink().stroke());
            g.draw(new Line2D.Double(
                    layout.pageX(guide.x1()), layout.pageY(guide.y1()),
                    layout.pageX(guide.x2()), layout.pageY(guide.y2())));
        }
        g.setClip(clip);
    }

    private void paintLayers(Graphics2D g) {
        if (figure.layers().isEmpty()) {
            return;
        }
        AffineTransform page = g.getTransform();
        g.translate(layout.plot().x, layout.plot().y);
        barePlot().paint(g, layout.plot().width, layout.plot().height);
        g.setTransform(page);
    }

    private static void paintSample(Graphics2D g, Layout.Sample sample) {
        Ink ink = sample.ink();
        double half = sample.width() / 2;
        g.setColor(ink.color());
        g.setStroke(ink.stroke());
        switch (sample.form()) {
            case LINE -> g.draw(new Line2D.Double(sample.x() - half, sample.y(), sample.x() + half, sample.y()));
            case BARS -> {
                g.setStroke(ink.barStroke());
                g.draw(new Line2D.Double(sample.x() - half, sample.y(), sample.x() + half, sample.y()));
            }
            case BAND -> g.fill(new Rectangle2D.Double(sample.x() - half, sample.y() - 6, 2 * half, 12));
            case POINTS -> ink.marking().paint(g, sample.x(), sample.y());
        }
    }
}
