package countwright.chart;

import java.awt.BasicStroke;
import java.awt.Color;
import org.jspecify.annotations.Nullable;

/**
 * How one kind of thing is drawn, the same in every chart. Kinds differ in marker or line as well as in colour, and
 * their colours differ in lightness.
 */
enum Ink {
    /** What was counted. */
    OBSERVED(new Color(0x1F2933), Marking.CIRCLE, 1.4f),
    /** What was counted, where it stands beside an estimate. */
    OBSERVED_BESIDE(new Color(0x1F2933), Marking.RING, 1.4f),
    /** What was counted, one of so many that they lie on each other. */
    OBSERVED_CROWD(new Color(0x1F, 0x29, 0x33, 0x46), Marking.SMALL_DOT, 1.4f),
    /** What a model says. */
    FITTED(new Color(0x0868AC), Marking.DIAMOND, 2.2f),
    /** How sure the model is. */
    BAND(new Color(0x08, 0x68, 0xAC, 0x30), Marking.NONE, 0f),
    /** A mean of many. */
    AVERAGE(new Color(0xC2540A), Marking.SQUARE, 2.2f),
    /** What would be the case if an assumption held. */
    REFERENCE(new Color(0x5B6673), Marking.NONE, 1.4f, 6f, 4f),
    /** A limit beside a reference. */
    LIMIT(new Color(0x5B6673), Marking.NONE, 1.2f, 2f, 3f);

    private final Color color;
    private final Marking marking;

    @SuppressWarnings("ImmutableEnumChecker") // a BasicStroke cannot change once made
    private final BasicStroke stroke;

    Ink(Color color, Marking marking, float width, float... dash) {
        this.color = color;
        this.marking = marking;
        float @Nullable [] pattern = dash.length == 0 ? null : dash;
        // The charting library draws a curve piece by piece: round ends close the joints.
        int cap = pattern == null ? BasicStroke.CAP_ROUND : BasicStroke.CAP_BUTT;
        this.stroke = new BasicStroke(width, cap, BasicStroke.JOIN_ROUND, 10f, pattern, 0f);
    }

    Color color() {
        return color;
    }

    Marking marking() {
        return marking;
    }

    BasicStroke stroke() {
        return stroke;
    }

    /** Returns the stroke of interval bars, which end exactly at their ends. */
    BasicStroke barStroke() {
        return new BasicStroke(stroke.getLineWidth(), BasicStroke.CAP_BUTT, BasicStroke.JOIN_ROUND);
    }
}
