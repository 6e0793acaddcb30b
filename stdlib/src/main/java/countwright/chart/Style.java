package countwright.chart;

import java.awt.BasicStroke;
import java.awt.Color;
import java.awt.Font;

/** The one look of all charts: sizes in CSS pixels, colours of paper, text and lines. Data colours are in {@link Ink}. */
final class Style {

    /** Width at which a chart is meant to be seen; fits the cell of a notebook and the text width of a printed page. */
    static final int WIDTH = 720;
    /** Height of a chart whose vertical axis holds numbers. */
    static final int HEIGHT = 440;
    /** A chart with a long header or caption grows rather than press its plot below this. */
    static final int LEAST_PLOT_HEIGHT = 230;

    static final int MARGIN = 18;

    /** White, not transparent: dark ink must stay readable in a dark notebook. */
    static final Color BACKGROUND = Color.WHITE;

    static final Color TEXT = new Color(0x1F2933);
    static final Color MUTED_TEXT = new Color(0x4A5561);
    static final Color GRID = new Color(0xE3E7EB);
    static final Color AXIS = new Color(0x8A949E);
    static final BasicStroke HAIRLINE = new BasicStroke(1f);

    private Style() {}

    static Font title() {
        return Fonts.bold(16.5f);
    }

    static Font subtitle() {
        return Fonts.regular(13f);
    }

    static Font label() {
        return Fonts.regular(12f);
    }

    static Font smallLabel() {
        return Fonts.regular(11f);
    }

    static Font axisTitle() {
        return Fonts.bold(12f);
    }

    static Font caption() {
        return Fonts.regular(11.5f);
    }
}
