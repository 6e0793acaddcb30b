package countwright.chart;

import java.awt.AlphaComposite;
import java.awt.BasicStroke;
import java.awt.Color;
import java.awt.Composite;
import java.awt.Font;
import java.awt.FontMetrics;
import java.awt.Graphics;
import java.awt.Graphics2D;
import java.awt.GraphicsConfiguration;
import java.awt.Image;
import java.awt.Paint;
import java.awt.Rectangle;
import java.awt.RenderingHints;
import java.awt.Shape;
import java.awt.Stroke;
import java.awt.font.FontRenderContext;
import java.awt.font.GlyphVector;
import java.awt.font.TextLayout;
import java.awt.geom.AffineTransform;
import java.awt.geom.Arc2D;
import java.awt.geom.Area;
import java.awt.geom.Ellipse2D;
import java.awt.geom.Line2D;
import java.awt.geom.Path2D;
import java.awt.geom.PathIterator;
import java.awt.geom.Rectangle2D;
import java.awt.geom.RoundRectangle2D;
import java.awt.image.BufferedImage;
import java.awt.image.BufferedImageOp;
import java.awt.image.ImageObserver;
import java.awt.image.RenderedImage;
import java.awt.image.renderable.RenderableImage;
import java.text.AttributedCharacterIterator;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/**
 * Writes what is drawn as SVG 1.1: every shape as a path in page coordinates, text as outlines, so that the picture
 * needs no font, style sheet or identifier and can stand many times in one page.
 *
 * <p>Covers what charts draw: solid colours, basic strokes, any transform, and clips, which are applied to the shapes
 * themselves. Pictures and other paints are refused with a message rather than left out.
 */
final class SvgGraphics extends Graphics2D {

    private static final double BEYOND_ANY_PAGE = 1e5;

    private final StringBuilder out;
    private AffineTransform transform = new AffineTransform();
    private @Nullable Shape pageClip;
    private Color color = Color.BLACK;
    private Color background = Color.WHITE;
    private Stroke stroke = new BasicStroke(1f);
    private Font font = Style.label();
    private Composite composite = AlphaComposite.SrcOver;
    private final RenderingHints hints =
            new RenderingHints(RenderingHints.KEY_ANTIALIASING, RenderingHints.VALUE_ANTIALIAS_ON);

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
    public void drawString(String text, float x, float y) {
        if (!text.isEmpty()) {
            fill(new TextLayout(text, font, getFontRenderContext())
                    .getOutline(AffineTransform.getTranslateInstance(x, y)));
        }
    }

    @Override
    public void drawString(AttributedCharacterIterator text, float x, float y) {
        fill(new TextLayout(text, getFontRenderContext()).getOutline(AffineTransform.getTranslateInstance(x, y)));
    }

    @Override
    public void drawString(String text, int x, int y) {
        drawString(text, (float) x, (float) y);
    }

    @Override
    public void drawString(AttributedCharacterIterator text, int x, int y) {
        drawString(text, (float) x, (float) y);
    }

    @Override
    public void drawGlyphVector(GlyphVector glyphs, float x, float y) {
        fill(glyphs.getOutline(x, y));
    }

    @Override
    public void drawLine(int x1, int y1, int x2, int y2) {
        draw(new Line2D.Double(x1, y1, x2, y2));
    }

    @Override
    public void fillRect(int x, int y, int width, int height) {
        fill(new Rectangle(x, y, width, height));
    }

    @Override
    public void clearRect(int x, int y, int width, int height) {
        Color before = color;
        color = background;
        fillRect(x, y, width, height);
        color = before;
    }

    @Override
    public void drawRoundRect(int x, int y, int width, int height, int arcWidth, int arcHeight) {
        draw(new RoundRectangle2D.Double(x, y, width, height, arcWidth, arcHeight));
    }

    @Override
    public void fillRoundRect(int x, int y, int width, int height, int arcWidth, int arcHeight) {
        fill(new RoundRectangle2D.Double(x, y, width, height, arcWidth, arcHeight));
    }

    @Override
    public void drawOval(int x, int y, int width, int height) {
        draw(new Ellipse2D.Double(x, y, width, height));
    }

    @Override
    public void fillOval(int x, int y, int width, int height) {
        fill(new Ellipse2D.Double(x, y, width, height));
    }

    @Override
    public void drawArc(int x, int y, int width, int height, int start, int extent) {
        draw(new Arc2D.Double(x, y, width, height, start, extent, Arc2D.OPEN));
    }

    @Override
    public void fillArc(int x, int y, int width, int height, int start, int extent) {
        fill(new Arc2D.Double(x, y, width, height, start, extent, Arc2D.PIE));
    }

    @Override
    public void drawPolyline(int[] x, int[] y, int count) {
        draw(polyline(x, y, count));
    }

    @Override
    public void drawPolygon(int[] x, int[] y, int count) {
        Path2D path = polyline(x, y, count);
        path.closePath();
        draw(path);
    }

    @Override
    public void fillPolygon(int[] x, int[] y, int count) {
        fill(polyline(x, y, count));
    }

    private static Path2D polyline(int[] x, int[] y, int count) {
        Path2D path = new Path2D.Double();
        for (int i = 0; i < count; i++) {
            if (i == 0) {
                path.moveTo(x[i], y[i]);
            } else {
                path.lineTo(x[i], y[i]);
            }
        }
        return path;
    }

    @Override
    public Graphics create() {
        SvgGraphics copy = new SvgGraphics(out);
        copy.transform = new AffineTransform(transform);
        copy.pageClip = pageClip;
        copy.color = color;
        copy.background = background;
        copy.stroke = stroke;
        copy.font = font;
        copy.composite = composite;
        copy.hints.putAll(hints);
        return copy;
    }

    @Override
    public void dispose() {}

    @Override
    public void clip(@Nullable Shape shape) {
        if (shape == null) {
            pageClip = null;
            return;
        }
        Shape added = transform.createTransformedShape(shape);
        if (pageClip == null) {
            pageClip = added;
        } else {
            Area both = new Area(pageClip);
            both.intersect(new Area(added));
            pageClip = both;
        }
    }

    @Override
    public void clipRect(int x, int y, int width, int height) {
        clip(new Rectangle(x, y, width, height));
    }

    @Override
    public void setClip(int x, int y, int width, int height) {
        setClip(new Rectangle(x, y, width, height));
    }

    @Override
    public void setClip(@Nullable Shape shape) {
        pageClip = shape == null ? null : transform.createTransformedShape(shape);
    }

    @Override
    @SuppressWarnings("NullAway") // the platform's contract: null means no clip
    public @Nullable Shape getClip() {
        return pageClip == null ? null : inverse().createTransformedShape(pageClip);
    }

    @Override
    @SuppressWarnings("NullAway") // as for getClip
    public @Nullable Rectangle getClipBounds() {
        Shape clip = getClip();
        return clip == null ? null : clip.getBounds();
    }

    private AffineTransform inverse() {
        AffineTransform inverse = new AffineTransform(transform);
        try {
            inverse.invert();
        } catch (java.awt.geom.NoninvertibleTransformException flat) {
            inverse.setToScale(BEYOND_ANY_PAGE, BEYOND_ANY_PAGE);
        }
        return inverse;
    }

    @Override
    public void translate(int x, int y) {
        transform.translate(x, y);
    }

    @Override
    public void translate(double x, double y) {
        transform.translate(x, y);
    }

    @Override
    public void rotate(double theta) {
        transform.rotate(theta);
    }

    @Override
    public void rotate(double theta, double x, double y) {
        transform.rotate(theta, x, y);
    }

    @Override
    public void scale(double x, double y) {
        transform.scale(x, y);
    }

    @Override
    public void shear(double x, double y) {
        transform.shear(x, y);
    }

    @Override
    public void transform(AffineTransform added) {
        transform.concatenate(added);
    }

    @Override
    public void setTransform(AffineTransform replacement) {
        transform = new AffineTransform(replacement);
    }

    @Override
    public AffineTransform getTransform() {
        return new AffineTransform(transform);
    }

    @Override
    public Color getColor() {
        return color;
    }

    @Override
    public void setColor(@Nullable Color newColor) {
        if (newColor != null) {
            color = newColor;
        }
    }

    @Override
    public Paint getPaint() {
        return color;
    }

    @Override
    public void setPaint(Paint paint) {
        if (!(paint instanceof Color solid)) {
            throw new UnsupportedOperationException("only solid colours are written as SVG, not " + paint);
        }
        color = solid;
    }

    @Override
    public void setBackground(Color newBackground) {
        background = newBackground;
    }

    @Override
    public Color getBackground() {
        return background;
    }

    @Override
    public void setStroke(Stroke newStroke) {
        stroke = newStroke;
    }

    @Override
    public Stroke getStroke() {
        return stroke;
    }

    @Override
    public Font getFont() {
        return font;
    }

    @Override
    public void setFont(Font newFont) {
        font = newFont;
    }

    @Override
    public FontMetrics getFontMetrics(Font of) {
        Graphics2D scratch = new BufferedImage(1, 1, BufferedImage.TYPE_INT_RGB).createGraphics();
        try {
            return scratch.getFontMetrics(of);
        } finally {
            scratch.dispose();
        }
    }

    @Override
    public FontRenderContext getFontRenderContext() {
        return new FontRenderContext(null, true, true);
    }

    @Override
    public void setComposite(Composite newComposite) {
        composite = newComposite;
    }

    @Override
    public Composite getComposite() {
        return composite;
    }

    @Override
    public void setPaintMode() {}

    @Override
    public void setXORMode(Color other) {
        throw new UnsupportedOperationException("SVG has no exclusive-or drawing");
    }

    @Override
    public void setRenderingHint(RenderingHints.Key key, Object value) {
        hints.put(key, value);
    }

    @Override
    public @Nullable Object getRenderingHint(RenderingHints.Key key) {
        return hints.get(key);
    }

    @Override
    public void setRenderingHints(Map<?, ?> newHints) {
        hints.clear();
        hints.putAll(newHints);
    }

    @Override
    public void addRenderingHints(Map<?, ?> newHints) {
        hints.putAll(newHints);
    }

    @Override
    public RenderingHints getRenderingHints() {
        return (RenderingHints) hints.clone();
    }

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

    @Override
    public void copyArea(int x, int y, int width, int height, int dx, int dy) {
        throw noPictures();
    }

    @Override
    public boolean drawImage(Image image, AffineTransform at, ImageObserver observer) {
        throw noPictures();
    }

    @Override
    public void drawImage(BufferedImage image, BufferedImageOp operation, int x, int y) {
        throw noPictures();
    }

    @Override
    public boolean drawImage(Image image, int x, int y, ImageObserver observer) {
        throw noPictures();
    }

    @Override
    public boolean drawImage(Image image, int x, int y, int width, int height, ImageObserver observer) {
        throw noPictures();
    }

    @Override
    public boolean drawImage(Image image, int x, int y, Color behind, ImageObserver observer) {
        throw noPictures();
    }

    @Override
    public boolean drawImage(Image image, int x, int y, int width, int height, Color behind, ImageObserver observer) {
        throw noPictures();
    }

    @Override
    public boolean drawImage(
            Image image,
            int dx1,
            int dy1,
            int dx2,
            int dy2,
            int sx1,
            int sy1,
            int sx2,
            int sy2,
            ImageObserver observer) {
        throw noPictures();
    }

    @Override
    public boolean drawImage(
            Image image,
            int dx1,
            int dy1,
            int dx2,
            int dy2,
            int sx1,
            int sy1,
            int sx2,
            int sy2,
            Color behind,
            ImageObserver observer) {
        throw noPictures();
    }

    @Override
    public void drawRenderedImage(RenderedImage image, AffineTransform at) {
        throw noPictures();
    }

    @Override
    public void drawRenderableImage(RenderableImage image, AffineTransform at) {
        throw noPictures();
    }

    private static UnsupportedOperationException noPictures() {
        return new UnsupportedOperationException("a chart written as SVG holds shapes and text, no pictures");
    }
}
