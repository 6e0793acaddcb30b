package countwright.chart;

import java.awt.AlphaComposite;
import java.awt.BasicStroke;
import java.awt.Color;
import java.awt.Composite;
import java.awt.Font;
import java.awt.FontMetrics;
import java.awt.Graphics2D;
import java.awt.Paint;
import java.awt.Rectangle;
import java.awt.RenderingHints;
import java.awt.Shape;
import java.awt.Stroke;
import java.awt.font.FontRenderContext;
import java.awt.geom.AffineTransform;
import java.awt.geom.Area;
import java.awt.image.BufferedImage;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/**
 * What is set on a drawing surface before something is drawn: colour, stroke, font, transform, clip. Knows nothing of where
 * the drawing goes.
 */
abstract class PenGraphics extends Graphics2D {

    private static final double BEYOND_ANY_PAGE = 1e5;

    AffineTransform transform = new AffineTransform();

    @Nullable
    Shape pageClip;

    Color color = Color.BLACK;
    Color background = Color.WHITE;
    Stroke stroke = new BasicStroke(1f);
    Font font = Style.label();
    private Composite composite = AlphaComposite.SrcOver;
    private final RenderingHints hints =
            new RenderingHints(RenderingHints.KEY_ANTIALIASING, RenderingHints.VALUE_ANTIALIAS_ON);

    /** Takes over everything set on another. */
    final void takeOver(PenGraphics other) {
        transform = new AffineTransform(other.transform);
        pageClip = other.pageClip;
        color = other.color;
        background = other.background;
        stroke = other.stroke;
        font = other.font;
        composite = other.composite;
        hints.putAll(other.hints);
    }

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
}
