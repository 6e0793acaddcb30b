package countwright.chart;

import java.awt.Color;
import java.awt.Font;
import java.awt.Rectangle;
import java.awt.geom.Rectangle2D;
import java.util.ArrayList;
import java.util.List;

/**
 * Where everything of a figure stands, in CSS pixels: header and key on top, then the plot with its axes, then the
 * caption. Texts are measured first and the plot takes what they leave, so that nothing is cut or overlaps; where a
 * header is long or there are many rows, the chart grows in height.
 */
final class Layout {

    /** A line of text at its place. */
    record Word(String text, Font font, Color color, double x, double baseline) {

        Rectangle2D bounds() {
            return Lettering.outline(text, font, x, baseline).getBounds2D();
        }
    }

    /** The sample of an ink in the key, centred at a point. */
    record Sample(Layer.Form form, Ink ink, double x, double y) {

        double width() {
            return form == Layer.Form.POINTS ? POINT_SAMPLE : LINE_SAMPLE;
        }
    }

    /** A tick or row at its place along an axis. */
    record Mark(double position) {}

    private record Entry(String name, Layer.Form form, Ink ink) {}

    private static final double LINE_SAMPLE = 24;
    private static final double POINT_SAMPLE = 11;
    private static final double GAP = 8;

    private final Figure figure;
    private final List<Word> words = new ArrayList<>();
    private final List<Sample> samples = new ArrayList<>();
    private final List<Mark> xMarks = new ArrayList<>();
    private final List<Mark> yMarks = new ArrayList<>();
    private final Rectangle plot;
    private final int height;

    private Layout(Figure figure) {
        this.figure = figure;
        double y = header();
        y = key(y);
        List<String> yTitle = Lettering.wrap(figure.y().title(), Style.axisTitle(), fullWidth(), 2);
        Rows rows = Rows.of(figure.rows());
        int top = (int) Math.ceil(aboveThePlot(y, yTitle, rows) + 6);

        int left = (int) Math.ceil(Style.MARGIN + (rows.isEmpty() ? widest(figure.y()) : rows.nameWidth()) + GAP);
        int right = (int) Math.floor(Style.WIDTH - Style.MARGIN - (rows.isEmpty() ? 0 : rows.numbersWidth() + GAP + 4));
        List<String> xTitle = Lettering.wrap(figure.x().title(), Style.axisTitle(), fullWidth(), 2);
        List<String> caption = Lettering.wrap(figure.caption(), Style.caption(), fullWidth(), 7);
        int below = (int) Math.ceil(GAP
                + Lettering.lineHeight(Style.label())
                + 3
                + xTitle.size() * Lettering.lineHeight(Style.axisTitle())
                + (caption.isEmpty() ? 0 : 8 + caption.size() * Lettering.lineHeight(Style.caption()))
                + 12);
        int plotHeight = rows.isEmpty()
                ? Math.max(Style.LEAST_PLOT_HEIGHT, Style.HEIGHT - top - below)
                : rows.pitch() * figure.rows().size() + 8;
        this.plot = new Rectangle(left, top, right - left, plotHeight);
        this.height = top + plotHeight + below;
        if (rows.isEmpty()) {
            yTicks();
        } else {
            nameRows(rows);
        }
        double bottom = xTicks();
        bottom = centred(xTitle, Style.axisTitle(), bottom + 3);
        lines(caption, Style.caption(), Style.MUTED_TEXT, Style.MARGIN, bottom + 8);
    }

    static Layout of(Figure figure) {
        return new Layout(figure);
    }

    int height() {
        return height;
    }

    Rectangle plot() {
        return plot;
    }

    List<Word> words() {
        return List.copyOf(words);
    }

    List<Sample> samples() {
        return List.copyOf(samples);
    }

    List<Mark> xMarks() {
        return List.copyOf(xMarks);
    }

    List<Mark> yMarks() {
        return List.copyOf(yMarks);
    }

    /** Returns where a value of the horizontal axis stands on the page. */
    double pageX(double value) {
        return plot.x + figure.x().fraction(value) * plot.width;
    }

    /** Returns where a value of the vertical axis stands on the page. */
    double pageY(double value) {
        return plot.y + (1 - figure.y().fraction(value)) * plot.height;
    }

    private static double fullWidth() {
        return Style.WIDTH - 2.0 * Style.MARGIN;
    }

    private double header() {
        double y = Style.MARGIN - 4;
        y = lines(
                Lettering.wrap(figure.title(), Style.title(), fullWidth(), 3),
                Style.title(),
                Style.TEXT,
                Style.MARGIN,
                y);
        List<String> subtitle = Lettering.wrap(figure.subtitle(), Style.subtitle(), fullWidth(), 4);
        return lines(subtitle, Style.subtitle(), Style.MUTED_TEXT, Style.MARGIN, y + 1);
    }

    private double key(double top) {
        List<Entry> entries = new ArrayList<>();
        for (Layer layer : figure.layers()) {
            if (!layer.name().isEmpty()) {
                entries.add(new Entry(layer.name(), layer.form(), layer.ink()));
            }
        }
        for (Figure.Guide guide : figure.guides()) {
            if (!guide.name().isEmpty()) {
                entries.add(new Entry(guide.name(), Layer.Form.LINE, guide.ink()));
            }
        }
        if (entries.isEmpty()) {
            return top;
        }
        Font font = Style.label();
        double lineHeight = Lettering.lineHeight(font) + 2;
        double x = Style.MARGIN;
        double y = top + 6;
        for (Entry entry : entries) {
            double indent = (entry.form() == Layer.Form.POINTS ? POINT_SAMPLE : LINE_SAMPLE) + 6;
            List<String> lines = Lettering.wrap(entry.name(), font, fullWidth() - indent, 2);
            double width = lines.stream()
                    .mapToDouble(line -> Lettering.width(line, font))
                    .max()
                    .orElse(0);
            if (x > Style.MARGIN && x + indent + width > Style.WIDTH - Style.MARGIN) {
                x = Style.MARGIN;
                y += lineHeight;
            }
            samples.add(new Sample(entry.form(), entry.ink(), x + (indent - 6) / 2, y + lineHeight / 2));
            double end = lines(lines, font, Style.TEXT, x + indent, y + 1);
            if (lines.size() > 1) {
                y = end - lineHeight;
            }
            x += indent + width + 20;
        }
        return y + lineHeight;
    }

    private double aboveThePlot(double y, List<String> yTitle, Rows rows) {
        double start = y + 8;
        if (!rows.isEmpty() && !figure.rowHeading().isEmpty()) {
            Font font = Style.axisTitle();
            double limit = fullWidth() * 0.7;
            double end = start;
            for (String line : Lettering.wrap(figure.rowHeading(), font, limit, 3)) {
                double x = Style.WIDTH - Style.MARGIN - Lettering.width(line, font);
                end = lines(List.of(line), font, Style.MUTED_TEXT, x, end);
            }
            return end;
        }
        return lines(yTitle, Style.axisTitle(), Style.MUTED_TEXT, Style.MARGIN, start);
    }

    private void yTicks() {
        Font font = Style.label();
        double lowestFree = Double.POSITIVE_INFINITY;
        for (Axis.Tick tick : figure.y().ticks()) {
            double position = pageY(tick.value());
            if (position + font.getSize2D() * 0.7 > lowestFree
                    || position < plot.y - 1
                    || position > plot.getMaxY() + 1) {
                continue;
            }
            yMarks.add(new Mark(position));
            word(tick.label(), font, plot.x - GAP - Lettering.width(tick.label(), font), centreOn(position, font));
            lowestFree = position - font.getSize2D() * 0.7;
        }
    }

    private void nameRows(Rows rows) {
        int count = figure.rows().size();
        Font font = rows.font();
        for (int i = 0; i < count; i++) {
            double position = pageY(count - i);
            yMarks.add(new Mark(position));
            List<String> name = rows.names().get(i);
            double step = font.getSize2D() * 1.2;
            double first = centreOn(position, font) - step * (name.size() - 1) / 2;
            for (int line = 0; line < name.size(); line++) {
                double x = plot.x - GAP - Lettering.width(name.get(line), font);
                word(name.get(line), font, x, first + line * step);
            }
            String numbers = figure.rows().get(i).numbers();
            double x = Style.WIDTH - Style.MARGIN - Lettering.width(numbers, font);
            words.add(new Word(numbers, font, Style.MUTED_TEXT, x, centreOn(position, font)));
        }
    }

    private double xTicks() {
        Font font = Style.label();
        double baseline = plot.getMaxY() + GAP + Lettering.ascent(font);
        double free = Double.NEGATIVE_INFINITY;
        for (Axis.Tick tick : figure.x().ticks()) {
            double position = pageX(tick.value());
            double width = Lettering.width(tick.label(), font);
            double x = Math.min(position - width / 2, Style.WIDTH - 3 - width);
            if (x < free + 10 || position < plot.x - 1 || position > plot.getMaxX() + 1) {
                continue;
            }
            xMarks.add(new Mark(position));
            word(tick.label(), font, x, baseline);
            free = x + width;
        }
        return plot.getMaxY() + GAP + Lettering.lineHeight(font);
    }

    private double centred(List<String> texts, Font font, double top) {
        double y = top;
        for (String text : texts) {
            double width = Lettering.width(text, font);
            double middle = plot.getCenterX() - width / 2;
            double x = Math.max(Style.MARGIN, Math.min(middle, Style.WIDTH - Style.MARGIN - width));
            y = lines(List.of(text), font, Style.MUTED_TEXT, x, y);
        }
        return y;
    }

    private double lines(List<String> texts, Font font, Color color, double x, double top) {
        double y = top;
        for (String text : texts) {
            words.add(new Word(text, font, color, x, y + Lettering.ascent(font)));
            y += Lettering.lineHeight(font);
        }
        return y;
    }

    private void word(String text, Font font, double x, double baseline) {
        words.add(new Word(text, font, Style.TEXT, x, baseline));
    }

    private static double centreOn(double position, Font font) {
        return position + font.getSize2D() * 0.36;
    }

    private static double widest(Axis axis) {
        return axis.ticks().stream()
                .mapToDouble(tick -> Lettering.width(tick.label(), Style.label()))
                .max()
                .orElse(0);
    }

    /** The named rows of a figure, measured. */
    private record Rows(List<List<String>> names, Font font, int pitch, double nameWidth, double numbersWidth) {

        private static final double WIDEST_NAME = 230;

        static Rows of(List<Figure.NamedRow> rows) {
            int count = rows.size();
            Font font = count <= 40 ? Style.label() : Style.smallLabel();
            List<List<String>> names = new ArrayList<>();
            double nameWidth = 0;
            double numbersWidth = 0;
            boolean broken = false;
            for (Figure.NamedRow row : rows) {
                List<String> name = Lettering.wrap(row.name(), font, WIDEST_NAME, 2);
                broken |= name.size() > 1;
                names.add(name);
                for (String line : name) {
                    nameWidth = Math.max(nameWidth, Lettering.width(line, font));
                }
                numbersWidth = Math.max(numbersWidth, Lettering.width(row.numbers(), font));
            }
            int pitch = broken ? 34 : count <= 14 ? 26 : count <= 40 ? 19 : 16;
            return new Rows(names, font, pitch, nameWidth, numbersWidth);
        }

        boolean isEmpty() {
            return names.isEmpty();
        }
    }
}
