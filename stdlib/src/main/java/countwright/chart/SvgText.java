package countwright.chart;

import java.awt.BasicStroke;
import java.awt.Color;
import java.awt.Shape;
import java.awt.geom.PathIterator;
import java.awt.geom.Rectangle2D;
import java.util.Locale;

/** Shapes, colours and strokes as the attributes of SVG. */
final class SvgText {

    private static final String[] COMMANDS = {"M", "l", "q", "c", "z"};
    private static final int[] NUMBERS = {2, 2, 4, 6, 0};

    private SvgText() {}

    /** Returns path data to a hundredth of a pixel, relative after each start, which halves the length of outlines. */
    static String path(Shape shape) {
        StringBuilder data = new StringBuilder();
        double[] point = new double[6];
        // Where the reader's pen is after rounding, in hundredths, so that rounding errors do not add up.
        long penX = 0;
        long penY = 0;
        long startX = 0;
        long startY = 0;
        for (PathIterator path = shape.getPathIterator(null); !path.isDone(); path.next()) {
            int segment = path.currentSegment(point);
            data.append(COMMANDS[segment]);
            boolean absolute = segment == PathIterator.SEG_MOVETO;
            long lastX = penX;
            long lastY = penY;
            for (int i = 0; i < NUMBERS[segment]; i += 2) {
                lastX = Math.round(point[i] * 100);
                lastY = Math.round(point[i + 1] * 100);
                append(data, absolute ? lastX : lastX - penX);
                append(data, absolute ? lastY : lastY - penY);
            }
            penX = lastX;
            penY = lastY;
            if (absolute) {
                startX = penX;
                startY = penY;
            } else if (segment == PathIterator.SEG_CLOSE) {
                penX = startX;
                penY = startY;
            }
        }
        return data.toString();
    }

    /** Returns the start of a circle inside a square. */
    static String circle(Rectangle2D square) {
        return String.format(
                Locale.ROOT,
                "<circle cx=\"%.2f\" cy=\"%.2f\" r=\"%.2f\"",
                square.getCenterX(),
                square.getCenterY(),
                square.getWidth() / 2);
    }

    static String paint(String attribute, Color color) {
        String text = String.format(
                Locale.ROOT, " %s=\"#%02x%02x%02x\"", attribute, color.getRed(), color.getGreen(), color.getBlue());
        return color.getAlpha() == 255
                ? text
                : text + String.format(Locale.ROOT, " %s-opacity=\"%.3f\"", attribute, color.getAlpha() / 255.0);
    }

    static String stroke(BasicStroke stroke) {
        StringBuilder text = new StringBuilder();
        text.append(" stroke-width=\"").append(stroke.getLineWidth()).append('"');
        switch (stroke.getEndCap()) {
            case BasicStroke.CAP_ROUND -> text.append(" stroke-linecap=\"round\"");
            case BasicStroke.CAP_SQUARE -> text.append(" stroke-linecap=\"square\"");
            default -> {}
        }
        switch (stroke.getLineJoin()) {
            case BasicStroke.JOIN_ROUND -> text.append(" stroke-linejoin=\"round\"");
            case BasicStroke.JOIN_BEVEL -> text.append(" stroke-linejoin=\"bevel\"");
            default -> {}
        }
        float[] dash = stroke.getDashArray();
        if (dash != null) {
            text.append(" stroke-dasharray=\"");
            for (int i = 0; i < dash.length; i++) {
                text.append(i == 0 ? "" : " ").append(dash[i]);
            }
            text.append('"');
        }
        return text.toString();
    }

    /** Escapes text for content and attributes, leaving out what XML 1.0 cannot hold. */
    static String escaped(String text) {
        StringBuilder escaped = new StringBuilder();
        text.codePoints().forEach(c -> {
            switch (c) {
                case '&' -> escaped.append("&amp;");
                case '<' -> escaped.append("&lt;");
                case '>' -> escaped.append("&gt;");
                case '"' -> escaped.append("&quot;");
                default -> {
                    boolean allowed = c >= 0x20 && c != 0xFFFE && c != 0xFFFF && !(c >= 0xD800 && c <= 0xDFFF);
                    escaped.appendCodePoint(allowed ? c : ' ');
                }
            }
        });
        return escaped.toString();
    }

    private static void append(StringBuilder data, long hundredths) {
        char last = data.charAt(data.length() - 1);
        if (hundredths >= 0 && (Character.isDigit(last) || last == '.')) {
            data.append(' ');
        }
        long whole = Math.abs(hundredths) / 100;
        long part = Math.abs(hundredths) % 100;
        if (hundredths < 0) {
            data.append('-');
        }
        if (whole != 0 || part == 0) {
            data.append(whole);
        }
        if (part != 0) {
            data.append('.').append(part / 10);
            if (part % 10 != 0) {
                data.append(part % 10);
            }
        }
    }
}
