package countwright.chart;

import java.awt.BasicStroke;
import java.awt.Graphics;
import java.awt.GraphicsConfiguration;
import java.awt.Rectangle;
import java.awt.Shape;
import java.awt.geom.AffineTransform;
import java.awt.geom.Area;
import java.awt.geom.Ellipse2D;
import java.awt.geom.PathIterator;
import java.awt.geom.Rectangle2D;
import org.jspecify.annotations.Nullable;

/**
 * Writes what is drawn as SVG 1.1: every shape as a path in page coordinates, text as outlines, so that the picture
 * needs no font, style sheet or identifier and can stand many times in one page.
 *
 * <p>Covers what charts draw: solid colours, basic strokes, any transform, and clips, which are applied to the shapes
 * themselves. Pictures and other paints are refused with a message rather than left out.
 */
final class SvgGraphics extends ShapeGraphics {

    private final StringBuilder out;

    SvgGraphics() {
        this(new StringBuilder());
    }

    private SvgGraphics(StringBuilder out) {
        this.out = out;
    }

    /** Returns the finished document. */
    String document(int width, int height, String title, String description) {
        return "<svg xmlns=\"http://www.w3.org/2000/svg\" version=\"1.1\" width=\"" + width + "\" height=\"" + height
                + "\" viewBox=\"0 0 " + width + " " + height + "\" role=\"img\" aria-label=\"" + SvgText.escaped(title)
                + "\">\n<title>" + SvgText.escaped(title) + "</title>\n<desc>" + SvgText.escaped(description)
                + "</desc>\n" + out + "</svg>\n";
    }

    @Override
    public void fill(Shape shape) {
        Shape onPage = transform.createTransformedShape(shape);
        boolean moved = (transform.getType() & ~AffineTransform.TYPE_TRANSLATION) == 0;
        // Written as what it is, a dot takes a third of the space: residual charts hold thousands.
        if (moved && shape instanceof Ellipse2D dot && dot.getWidth() == dot.getHeight() && isInsideClip(onPage)) {
            if (color.getAlpha() > 0) {
                out.append(SvgText.circle(onPage.getBounds2D()))
                        .append(SvgText.paint("fill", color))
                        .append("/>\n");
            }
            return;
        }
        paint(onPage);
    }

    @Override
    public void draw(Shape shape) {
        boolean evenScale = Math.abs(transform.getDeterminant() - 1) < 1e-9
                && Math.abs(transform.getScaleX() - transform.getScaleY()) < 1e-9;
        Shape onPage = transform.createTransformedShape(shape);
        if (stroke instanceof BasicStroke basic && evenScale && isInsideClip(basic.createStrokedShape(onPage))) {
            if (color.getAlpha() > 0) {
                out.append("<path d=\"").append(SvgText.path(onPage)).append("\" fill=\"none\"");
                out.append(SvgText.paint("stroke", color))
                        .append(SvgText.stroke(basic))
                        .append("/>\n");
            }
            return;
        }
        fill(stroke.createStrokedShape(shape));
    }

    private void paint(Shape onPage) {
        if (color.getAlpha() == 0) {
            return;
        }
        Shape visible = onPage;
        if (!isInsideClip(onPage)) {
            Area cut = new Area(onPage);
            cut.intersect(new Area(pageClip));
            if (cut.isEmpty()) {
                return;
            }
            visible = cut;
        }
        boolean evenOdd = visible.getPathIterator(null).getWindingRule() == PathIterator.WIND_EVEN_ODD;
        out.append("<path d=\"").append(SvgText.path(visible)).append('"').append(SvgText.paint("fill", color));
        out.append(evenOdd ? " fill-rule=\"evenodd\"/>\n" : "/>\n");
    }

    private boolean isInsideClip(Shape onPage) {
        if (pageClip == null) {
            return true;
        }
        Rectangle2D bounds = onPage.getBounds2D();
        Rectangle2D limits = pageClip.getBounds2D();
        boolean rectangular = pageClip instanceof Rectangle2D || new Area(pageClip).isRectangular();
        return rectangular
                && bounds.getMinX() >= limits.getMinX() - 1e-6
                && bounds.getMinY() >= limits.getMinY() - 1e-6
                && bounds.getMaxX() <= limits.getMaxX() + 1e-6
                && bounds.getMaxY() <= limits.getMaxY() + 1e-6;
    }

    @Override
    public Graphics create() {
        SvgGraphics copy = new SvgGraphics(out);
        copy.takeOver(this);
        return copy;
    }

    @Override
    public void dispose() {}

    @Override
    public boolean hit(Rectangle area, Shape shape, boolean onStroke) {
        Shape tested = onStroke ? stroke.createStrokedShape(shape) : shape;
        return transform.createTransformedShape(tested).intersects(area);
    }

    @Override
    @SuppressWarnings("NullAway") // a page has no device; nothing we draw asks for one
    public @Nullable GraphicsConfiguration getDeviceConfiguration() {
        return null;
    }
}
