package countwright.kernel.cli;

import java.awt.BasicStroke;
import java.awt.Color;
import java.awt.Graphics2D;
import java.awt.RenderingHints;
import java.awt.geom.Ellipse2D;
import java.awt.geom.Line2D;
import java.awt.image.BufferedImage;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Locale;
import javax.imageio.ImageIO;

/**
 * The drawing behind the three logo files: five things counted as a tally, on a round badge. Each shape is given once,
 * on a square of 64 units, and drawn as SVG and as PNG.
 */
final class Logo {

    private static final double SIDE = 64;
    private static final Color BADGE = new Color(0x1B, 0x4F, 0x6B);
    private static final Color CHALK = new Color(0xFD, 0xFC, 0xF9);
    private static final Color FIFTH = new Color(0xF4, 0xB4, 0x3F);

    private record Stroke(double x1, double y1, double x2, double y2, double width, Color color) {}

    /** The fourth part of a tally leans a little, as written by hand; the fifth crosses the four. */
    private static final List<Stroke> STROKES = List.of(
            new Stroke(19, 18, 18, 46, 4.6, CHALK),
            new Stroke(28, 17, 27, 47, 4.6, CHALK),
            new Stroke(37, 17, 36, 47, 4.6, CHALK),
            new Stroke(46, 18, 45, 46, 4.6, CHALK),
            new Stroke(11.5, 41, 52.5, 23, 5, FIFTH));

    private Logo() {}

    /** Writes the three files into a folder. */
    static void write(Path folder) throws IOException {
        Files.writeString(folder.resolve("logo-svg.svg"), svg(), StandardCharsets.UTF_8);
        for (int side : new int[] {32, 64}) {
            ImageIO.write(
                    png(side),
                    "png",
                    folder.resolve("logo-" + side + "x" + side + ".png").toFile());
        }
    }

    static String svg() {
        StringBuilder svg = new StringBuilder(
                "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 64 64\" role=\"img\" aria-label=\"Countwright\">\n");
        svg.append("  <circle cx=\"32\" cy=\"32\" r=\"32\" fill=\"%s\"/>\n".formatted(hex(BADGE)));
        for (Stroke stroke : STROKES) {
            svg.append(String.format(
                    Locale.ROOT,
                    "  <line x1=\"%s\" y1=\"%s\" x2=\"%s\" y2=\"%s\" stroke=\"%s\" stroke-width=\"%s\" stroke-linecap=\"round\"/>%n",
                    number(stroke.x1),
                    number(stroke.y1),
                    number(stroke.x2),
                    number(stroke.y2),
                    hex(stroke.color),
                    number(stroke.width)));
        }
        return svg.append("</svg>\n").toString().replace("\r\n", "\n");
    }

    static BufferedImage png(int side) {
        BufferedImage image = new BufferedImage(side, side, BufferedImage.TYPE_INT_ARGB);
        Graphics2D graphics = image.createGraphics();
        graphics.setRenderingHint(RenderingHints.KEY_ANTIALIASING, RenderingHints.VALUE_ANTIALIAS_ON);
        graphics.setRenderingHint(RenderingHints.KEY_STROKE_CONTROL, RenderingHints.VALUE_STROKE_PURE);
        graphics.scale(side / SIDE, side / SIDE);
        graphics.setColor(BADGE);
        graphics.fill(new Ellipse2D.Double(0, 0, SIDE, SIDE));
        for (Stroke stroke : STROKES) {
            graphics.setColor(stroke.color);
            graphics.setStroke(new BasicStroke((float) stroke.width, BasicStroke.CAP_ROUND, BasicStroke.JOIN_ROUND));
            graphics.draw(new Line2D.Double(stroke.x1, stroke.y1, stroke.x2, stroke.y2));
        }
        graphics.dispose();
        return image;
    }

    private static String hex(Color color) {
        return String.format(Locale.ROOT, "#%06x", color.getRGB() & 0xFFFFFF);
    }

    private static String number(double value) {
        return value == Math.rint(value) ? Integer.toString((int) value) : Double.toString(value);
    }
}
