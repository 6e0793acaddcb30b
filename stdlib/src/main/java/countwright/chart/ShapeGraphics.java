package countwright.chart;

import java.awt.Color;
import java.awt.Image;
import java.awt.Rectangle;
import java.awt.font.GlyphVector;
import java.awt.font.TextLayout;
import java.awt.geom.AffineTransform;
import java.awt.geom.Arc2D;
import java.awt.geom.Ellipse2D;
import java.awt.geom.Line2D;
import java.awt.geom.Path2D;
import java.awt.geom.RoundRectangle2D;
import java.awt.image.BufferedImage;
import java.awt.image.BufferedImageOp;
import java.awt.image.ImageObserver;
import java.awt.image.RenderedImage;
import java.awt.image.renderable.RenderableImage;
import java.text.AttributedCharacterIterator;

/**
 * A drawing surface on which everything is a shape: each of the platform's many ways to draw comes down to filling or
 * stroking one. Pictures are refused with a message rather than left out.
 */
abstract class ShapeGraphics extends PenGraphics {

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
