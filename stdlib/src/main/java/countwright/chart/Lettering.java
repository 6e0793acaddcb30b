package countwright.chart;

import java.awt.Font;
import java.awt.Shape;
import java.awt.font.FontRenderContext;
import java.awt.font.TextLayout;
import java.awt.geom.AffineTransform;
import java.util.ArrayList;
import java.util.List;

/** Text measured, broken into lines, and turned into outlines, so that PNG and SVG look alike whatever is installed. */
final class Lettering {

    private static final FontRenderContext CONTEXT = new FontRenderContext(null, true, true);
    private static final String ELLIPSIS = "\u2026";

    private Lettering() {}

    static double width(String text, Font font) {
        return text.isEmpty() ? 0 : layout(text, font).getAdvance();
    }

    static double lineHeight(Font font) {
        return Math.ceil(font.getSize2D() * 1.38);
    }

    /** Returns the height of the letters above the base line. */
    static double ascent(Font font) {
        return font.getSize2D() * 1.02;
    }

    /** Returns the outline of a text whose base line starts at a point. */
    static Shape outline(String text, Font font, double x, double baseline) {
        return layout(text, font).getOutline(AffineTransform.getTranslateInstance(x, baseline));
    }

    /**
     * Breaks a text into lines no wider than a limit: between words, and within a word that is too wide by itself. What
     * does not fit into the last line ends with an ellipsis.
     */
    static List<String> wrap(String text, Font font, double limit, int mostLines) {
        List<String> lines = new ArrayList<>();
        String rest = text.strip();
        while (!rest.isEmpty()) {
            if (width(rest, font) <= limit) {
                lines.add(rest);
                break;
            }
            if (lines.size() == mostLines - 1) {
                lines.add(shortened(rest, font, limit));
                break;
            }
            int cut = lineBreak(rest, font, limit);
            lines.add(rest.substring(0, cut).strip());
            rest = rest.substring(cut).strip();
        }
        return lines;
    }

    private static String shortened(String text, Font font, double limit) {
        int end = fitting(text, font, limit - width(ELLIPSIS, font));
        return text.substring(0, end).strip() + ELLIPSIS;
    }

    private static int lineBreak(String text, Font font, double limit) {
        int most = fitting(text, font, limit);
        if (most >= text.length()) {
            return text.length();
        }
        for (int i = most; i > most / 3; i--) {
            if (text.charAt(i) == ' ' || (i < most && text.charAt(i - 1) == '-')) {
                return i;
            }
        }
        return most;
    }

    /** Returns how many leading chars fit, at least one character, never half of a surrogate pair. */
    private static int fitting(String text, Font font, double limit) {
        int low = 1;
        int high = text.length() - 1;
        while (low < high) {
            int middle = (low + high + 1) / 2;
            if (width(text.substring(0, middle), font) <= limit) {
                low = middle;
            } else {
                high = middle - 1;
            }
        }
        int end = Math.max(1, low);
        return Character.isHighSurrogate(text.charAt(end - 1)) ? Math.min(end + 1, text.length()) : end;
    }

    private static TextLayout layout(String text, Font font) {
        // Line ends and tabs inside a level's name would be drawn as boxes.
        String oneLine = text.replaceAll("\\p{Cntrl}", " ");
        return new TextLayout(oneLine, Fonts.covering(font, oneLine), CONTEXT);
    }
}
