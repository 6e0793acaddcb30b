package countwright.chart;

import java.util.ArrayList;
import java.util.List;

/**
 * What a chart shows, before anything is laid out.
 *
 * @param title what is seen, in a few words
 * @param subtitle the sentence under the title; empty for none
 * @param caption how the figure was made, in full sentences
 * @param x the axis across
 * @param y the axis up, or {@link Axis#rows} where {@code rows} names what stands on it
 * @param rows the names on the vertical axis from the top down, each with the numbers beside it; empty for a number axis
 * @param rowHeading heads the numbers beside the rows
 * @param layers what is drawn, from back to front
 * @param guides straight lines across the plot, behind the layers
 */
record Figure(
        String title,
        String subtitle,
        String caption,
        Axis x,
        Axis y,
        List<NamedRow> rows,
        String rowHeading,
        List<Layer> layers,
        List<Guide> guides) {

    record NamedRow(String name, String numbers) {}

    /** A straight line between two points in data units, named in the key unless its name is empty. */
    record Guide(String name, Ink ink, double x1, double y1, double x2, double y2) {

        static Guide across(String name, Ink ink, Axis x, double y) {
            return new Guide(name, ink, x.min(), y, x.max(), y);
        }

        static Guide up(String name, Ink ink, Axis y, double x) {
            return new Guide(name, ink, x, y.min(), x, y.max());
        }
    }

    Figure {
        rows = List.copyOf(rows);
        layers = List.copyOf(layers);
        guides = List.copyOf(guides);
    }

    static Figure titled(String title, Axis x, Axis y) {
        return new Figure(title, "", "", x, y, List.of(), "", List.of(), List.of());
    }

    Figure subtitle(String text) {
        return new Figure(title, text, caption, x, y, rows, rowHeading, layers, guides);
    }

    Figure caption(String text) {
        return new Figure(title, subtitle, text, x, y, rows, rowHeading, layers, guides);
    }

    Figure rows(String heading, List<NamedRow> names) {
        return new Figure(title, subtitle, caption, x, y, names, heading, layers, guides);
    }

    Figure layer(Layer layer) {
        return layer.isEmpty() ? this : layers(plus(layers, layer));
    }

    Figure guide(Guide guide) {
        return new Figure(title, subtitle, caption, x, y, rows, rowHeading, layers, plus(guides, guide));
    }

    private Figure layers(List<Layer> newLayers) {
        return new Figure(title, subtitle, caption, x, y, rows, rowHeading, newLayers, guides);
    }

    private static <T> List<T> plus(List<T> list, T element) {
        List<T> longer = new ArrayList<>(list);
        longer.add(element);
        return longer;
    }
}
