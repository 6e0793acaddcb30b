package countwright.chart;

import countwright.show.Displayable;
import countwright.show.MimeBundle;
import java.awt.Graphics2D;
import java.awt.image.BufferedImage;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Locale;
import javax.imageio.ImageIO;
import org.knowm.xchart.XYChart;

/**
 * A finished figure. It shows itself as a PNG picture at twice its display size, as SVG, and in plain text as the numbers
 * it was drawn from. Immutable; made by {@link Charts}.
 */
public final class Chart implements Displayable {

    private static final int PIXELS_PER_CSS_PIXEL = 2;

    private final Figure figure;
    private final String summary;
    private final String numbers;

    private Chart(Figure figure, String summary, String numbers) {
        this.figure = figure;
        this.summary = summary;
        this.numbers = numbers;
    }

    /**
     * @param summary what the figure says, in a sentence or two
     * @param numbers the numbers that matter, as a table in plain text
     */
    static Chart of(Figure figure, String summary, String numbers) {
        return new Chart(figure, summary, numbers);
    }

    /** Returns the title of the figure. */
    public String title() {
        return figure.title();
    }

    /** Returns what the figure says, in words and numbers, for readers who cannot see it. */
    public String alternative() {
        return figure.title() + ". " + summary;
    }

    @Override
    public MimeBundle display() {
        Layout layout = layout();
        return MimeBundle.text(toString())
                .withSvg(svg(layout), alternative())
                .withPng(png(layout), Style.WIDTH, layout.height(), alternative());
    }

    /**
     * Writes the figure to a file, replacing what was there; the extension says how: .png for a picture of twice the
     * display size, .svg for one that scales.
     *
     * @return the file written
     * @throws IllegalArgumentException if the extension is another one
     * @throws UncheckedIOException if the file cannot be written
     */
    public Path save(Path file) {
        String name = file.toString().toLowerCase(Locale.ROOT);
        byte[] content;
        if (name.endsWith(".png")) {
            content = png(layout());
        } else if (name.endsWith(".svg")) {
            content = svg(layout()).getBytes(StandardCharsets.UTF_8);
        } else {
            throw new IllegalArgumentException("a chart is saved as .png or .svg, but the file is called '"
                    + file.getFileName() + "'. Give it one of these two extensions.");
        }
        Path parent = file.toAbsolutePath().getParent();
        if (parent != null && !Files.isDirectory(parent)) {
            throw new UncheckedIOException(new IOException("the chart cannot be saved to '" + file
                    + "', because the folder " + parent + " does not exist. Make it first, or name another."));
        }
        try {
            return Files.write(file, content);
        } catch (IOException failure) {
            throw new UncheckedIOException(
                    "the chart cannot be saved to '" + file + "' (" + failure.getMessage()
                            + "). Name a file that this user may write.",
                    failure);
        }
    }

    /** Writes the figure to a file; see {@link #save(Path)}. */
    public Path save(String file) {
        return save(Path.of(file));
    }

    /**
     * Returns the same data as a chart of the XChart library, to change there at will: a new one at each call, with
     * plain axes and titles drawn by that library. Its changes do not reach this figure.
     */
    public XYChart xchart() {
        return LibraryChart.of(figure, layout());
    }

    @Override
    public String toString() {
        return figure.title() + "\n" + summary + "\n\n" + numbers.strip()
                + (figure.caption().isEmpty() ? "" : "\n\n" + figure.caption());
    }

    Figure figure() {
        return figure;
    }

    /** Returns the places of everything; the first step that needs fonts, so the place to explain that there are none. */
    Layout layout() {
        try {
            return Layout.of(figure);
        } catch (LinkageError | InternalError | RuntimeException failure) {
            if (mentionsFontconfig(failure)) {
                throw new IllegalStateException(
                        "a chart cannot be drawn, because this Java finds no font on this machine. Install one, or write"
                                + " a font folder with Fonts.writeFontconfig(folder) and start Java with the"
                                + " environment variable FONTCONFIG_FILE naming the file it returns.",
                        failure);
            }
            throw failure;
        }
    }

    private static boolean mentionsFontconfig(Throwable failure) {
        for (Throwable cause = failure; cause != null; cause = cause.getCause()) {
            String message = cause.getMessage();
            if (message != null && message.toLowerCase(Locale.ROOT).contains("fontconfig")) {
                return true;
            }
        }
        return false;
    }

    private byte[] png(Layout layout) {
        BufferedImage image = new BufferedImage(
                PIXELS_PER_CSS_PIXEL * Style.WIDTH, PIXELS_PER_CSS_PIXEL * layout.height(), BufferedImage.TYPE_INT_RGB);
        Graphics2D g = image.createGraphics();
        g.scale(PIXELS_PER_CSS_PIXEL, PIXELS_PER_CSS_PIXEL);
        new Painter(figure, layout).paint(g);
        g.dispose();
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        try {
            // Not through a cache file: a session may run where the temporary folder is full or read-only.
            ImageIO.setUseCache(false);
            ImageIO.write(image, "png", bytes);
        } catch (IOException impossible) {
            throw new UncheckedIOException("a picture in memory cannot be encoded", impossible);
        }
        return bytes.toByteArray();
    }

    private String svg(Layout layout) {
        SvgGraphics g = new SvgGraphics();
        new Painter(figure, layout).paint(g);
        return g.document(Style.WIDTH, layout.height(), figure.title(), alternative());
    }
}
