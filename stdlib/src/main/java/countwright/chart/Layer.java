package countwright.chart;

import java.util.Arrays;
import org.knowm.xchart.XYChart;
import org.knowm.xchart.XYSeries;
import org.knowm.xchart.XYSeries.XYSeriesRenderStyle;
import org.knowm.xchart.style.lines.SeriesLines;
import org.knowm.xchart.style.markers.SeriesMarkers;

/** One set of points, lines or bars that share a meaning, a name in the key and an ink. */
final class Layer {

    enum Form {
        LINE,
        BAND,
        POINTS,
        BARS
    }

    private final String name;
    private final Form form;
    private final Ink ink;
    private final double[] x;
    private final double[] y;

    private Layer(String name, Form form, Ink ink, double[] x, double[] y) {
        this.name = name;
        this.form = form;
        this.ink = ink;
        this.x = x;
        this.y = y;
    }

    static Layer line(String name, Ink ink, double[] x, double[] y) {
        return new Layer(name, Form.LINE, ink, x.clone(), y.clone());
    }

    static Layer points(String name, Ink ink, double[] x, double[] y) {
        return new Layer(name, Form.POINTS, ink, x.clone(), y.clone());
    }

    /** Returns the area between two curves over the same x, which ascends. */
    static Layer band(String name, Ink ink, double[] x, double[] low, double[] high) {
        int n = x.length;
        double[] aroundX = Arrays.copyOf(x, 2 * n);
        double[] aroundY = Arrays.copyOf(low, 2 * n);
        for (int i = 0; i < n; i++) {
            aroundX[n + i] = x[n - 1 - i];
            aroundY[n + i] = high[n - 1 - i];
        }
        return new Layer(name, Form.BAND, ink, aroundX, aroundY);
    }

    /** Returns a bar from low to high at each y. */
    static Layer barsAcross(String name, Ink ink, double[] low, double[] high, double[] y) {
        return new Layer(name, Form.BARS, ink, ends(low, high), apart(y));
    }

    /** Returns a bar from low to high at each x. */
    static Layer barsUp(String name, Ink ink, double[] x, double[] low, double[] high) {
        double[] both = ends(low, high);
        for (int i = 2; i < both.length; i += 3) {
            both[i] = Double.NaN;
        }
        return new Layer(name, Form.BARS, ink, ends(x, x), both);
    }

    String name() {
        return name;
    }

    Form form() {
        return form;
    }

    Ink ink() {
        return ink;
    }

    boolean isEmpty() {
        return x.length == 0;
    }

    /** Adds this layer to a plot of the charting library. */
    void addTo(XYChart plot, String seriesName) {
        XYSeries series = plot.addSeries(seriesName, x.clone(), y.clone());
        series.setLineColor(ink.color());
        series.setMarkerColor(ink.color());
        series.setFillColor(ink.color());
        series.setLineStyle(ink.stroke());
        series.setMarker(SeriesMarkers.NONE);
        switch (form) {
            case LINE -> series.setXYSeriesRenderStyle(XYSeriesRenderStyle.Line);
            case BARS -> {
                series.setXYSeriesRenderStyle(XYSeriesRenderStyle.Line);
                series.setLineStyle(ink.barStroke());
            }
            case BAND -> {
                series.setXYSeriesRenderStyle(XYSeriesRenderStyle.PolygonArea);
                series.setLineStyle(SeriesLines.NONE);
            }
            case POINTS -> {
                series.setXYSeriesRenderStyle(XYSeriesRenderStyle.Scatter);
                series.setMarker(ink.marking().marker());
            }
        }
    }

    /** A gap, marked by NaN in y, lies between one bar and the next. */
    private static double[] ends(double[] low, double[] high) {
        double[] both = new double[3 * low.length];
        for (int i = 0; i < low.length; i++) {
            both[3 * i] = low[i];
            both[3 * i + 1] = high[i];
            both[3 * i + 2] = high[i];
        }
        return both;
    }

    private static double[] apart(double[] y) {
        double[] both = ends(y, y);
        for (int i = 2; i < both.length; i += 3) {
            both[i] = Double.NaN;
        }
        return both;
    }
}
