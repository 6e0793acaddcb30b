package countwright.chart;

import java.awt.BasicStroke;
import java.awt.Color;
import java.awt.Graphics2D;
import java.awt.Shape;
import java.awt.geom.Ellipse2D;
import java.awt.geom.Path2D;
import java.awt.geom.Rectangle2D;
import org.knowm.xchart.style.markers.Marker;

/** The shapes of data points, each with its own size, and a thin white rim that keeps neighbours apart. */
enum Marking {
    CIRCLE(7.5, Fill.SOLID),
    RING(7.5, Fill.HOLLOW),
    SMALL_DOT(4.6, Fill.BARE),
    DIAMOND(10, Fill.SOLID),
    SQUARE(7.5, Fill.SOLID),
    NONE(0, Fill.BARE);

    private enum Fill {
        SOLID,
        HOLLOW,
        BARE
    }

    private static final BasicStroke RIM = new BasicStroke(1.2f);
    private static final BasicStroke OUTLINE = new BasicStroke(1.6f);

    private final double size;
    private final Fill fill;

    Marking(double size, Fill fill) {
        this.size = size;
        this.fill = fill;
    }

    void paint(Graphics2D g, double x, double y) {
        if (this == NONE) {
            return;
        }
        Color color = g.getColor();
        Shape shape = shape(x, y);
        if (fill == Fill.HOLLOW) {
            g.setColor(Style.BACKGROUND);
            g.fill(shape);
            g.setColor(color);
            g.setStroke(OUTLINE);
            g.draw(shape);
            return;
        }
        if (fill == Fill.SOLID) {
            g.setColor(Style.BACKGROUND);
            g.setStroke(RIM);
            g.draw(shape);
            g.setColor(color);
        }
        g.fill(shape);
    }

    /** Returns this shape as the charting library wants it. */
    Marker marker() {
        return new Marker() {
            @Override
            public void paint(Graphics2D g, double x, double y, int ignoredSize) {
                Marking.this.paint(g, x, y);
            }
        };
    }

    private Shape shape(double x, double y) {
        double half = size / 2;
        if (this == DIAMOND) {
            Path2D path = new Path2D.Double();
            path.moveTo(x, y - half);
            path.lineTo(x + half, y);
            path.lineTo(x, y + half);
            path.lineTo(x - half, y);
            path.closePath();
            return path;
        }
        if (this == SQUARE) {
            return new Rectangle2D.Double(x - half, y - half, size, size);
        }
        return new Ellipse2D.Double(x - half, y - half, size, size);
    }
}
