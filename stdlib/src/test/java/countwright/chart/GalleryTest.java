package countwright.chart;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.model.Residual;
import countwright.show.MimeBundle;
import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.awt.geom.Rectangle2D;
import java.awt.image.BufferedImage;
import java.io.ByteArrayInputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Base64;
import java.util.List;
import java.util.stream.Stream;
import javax.imageio.ImageIO;
import javax.xml.parsers.DocumentBuilderFactory;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;

/** Every chart in every case that has ever looked bad; the pictures are left in target/charts to be looked at. */
class GalleryTest {

    private static final Path FOLDER = Path.of("target", "charts");
    private static final String LONG =
            "Reconditioned rolling stock of the northern harbour loop, second delivery, narrow doors";

    @ParameterizedTest(name = "{0}")
    @MethodSource("charts")
    void chart_everyCase_isWholeInEveryForm(String name, Chart chart) throws Exception {
        Files.createDirectories(FOLDER);
        chart.save(FOLDER.resolve(name + ".png"));
        chart.save(FOLDER.resolve(name + ".svg"));
        Files.writeString(FOLDER.resolve(name + ".txt"), chart.toString());

        MimeBundle bundle = chart.display();
        BufferedImage picture = decode(bundle);
        assertThat(bundle.metadata().get(MimeBundle.PNG))
                .containsEntry("width", picture.getWidth() / 2)
                .containsEntry("height", picture.getHeight() / 2)
                .containsEntry("alt", chart.alternative());
        assertThat(picture.getWidth()).isEqualTo(2 * Style.WIDTH);
        assertWellFormed(bundle.get(MimeBundle.SVG).orElseThrow());
        assertThat(bundle.plainText()).startsWith(chart.title()).doesNotContain("NaN");
        assertNothingCutOrOverlapping(chart.layout());
        assertEdgeIsBlank(picture);
    }

    static Stream<Arguments> charts() {
        List<String> four = SyntheticFit.depots(4);
        List<String> many = SyntheticFit.depots(36);
        List<String> strange =
                List.of(LONG, "Café Ωmega – Straße №5", "<b>&\"quoted\"</b>", "$x^2$", "東京", "line\nend");
        Table small = SyntheticFit.faults(36, four, 0, 11);
        Table large = SyntheticFit.faults(5000, many, 0.4, 12);
        Table odd = SyntheticFit.faults(60, strange, 0, 13);
        Table three = SyntheticFit.faults(3, SyntheticFit.depots(3), 0, 14);
        Table one = SyntheticFit.faults(1, SyntheticFit.depots(1), 0, 15);
        Table hundred = SyntheticFit.faults(1000, SyntheticFit.depots(100), 0, 16);
        return Stream.of(
                Arguments.of("rates-4", Charts.rates(small, "faults", "vehicleKm", "depot")),
                Arguments.of("rates-36", Charts.rates(large, "faults", "vehicleKm", "depot")),
                Arguments.of("rates-100", Charts.rates(hundred, "faults", "vehicleKm", "depot")),
                Arguments.of("rates-strange", Charts.rates(odd, "faults", "vehicleKm", "depot")),
                Arguments.of("rates-one", Charts.rates(one, "faults", "vehicleKm", "depot")),
                Arguments.of(
                        "rates-long-columns",
                        Charts.rates(longNames(small), LONG, LONG + " in km", LONG + " by depot")),
                Arguments.of("fitted-3", FittedChart.of(SyntheticFit.of(three, SyntheticFit.depots(3)), "age")),
                Arguments.of("fitted-36", FittedChart.of(SyntheticFit.of(small, four), "age")),
                Arguments.of("fitted-5000", FittedChart.of(SyntheticFit.of(large, many), "age")),
                Arguments.of("fitted-one", FittedChart.of(SyntheticFit.of(one, SyntheticFit.depots(1)), "age")),
                Arguments.of("levels-4", FittedChart.of(SyntheticFit.of(small, four), "depot")),
                Arguments.of("levels-36", FittedChart.of(SyntheticFit.of(large, many), "depot")),
                Arguments.of("levels-strange", FittedChart.of(SyntheticFit.of(odd, strange), "depot")),
                Arguments.of(
                        "residuals-3",
                        ResidualChart.of(SyntheticFit.of(three, SyntheticFit.depots(3)), Residual.DEVIANCE)),
                Arguments.of("residuals-36", ResidualChart.of(SyntheticFit.of(small, four), Residual.PEARSON)),
                Arguments.of("residuals-5000", ResidualChart.of(SyntheticFit.of(large, many), Residual.DEVIANCE)),
                Arguments.of("spread-36", Charts.meanVariance(large, "faults", "vehicleKm", "depot")),
                Arguments.of("spread-wide", Charts.meanVariance(wide(), "sightings", "site")),
                Arguments.of("spread-model", Charts.meanVariance(SyntheticFit.of(large, many), "depot")),
                Arguments.of("ratios-4", RateRatioChart.of(SyntheticFit.of(small, four))),
                Arguments.of("ratios-36", RateRatioChart.of(SyntheticFit.of(large, many))),
                Arguments.of("ratios-strange", RateRatioChart.of(SyntheticFit.of(odd, strange))));
    }

    private static Table longNames(Table table) {
        return Table.of(
                table.column("faults").named(LONG),
                table.column("vehicleKm").named(LONG + " in km"),
                table.column("depot").named(LONG + " by depot"));
    }

    /** Returns sites whose means run from a few to thousands, with a variance of twice the mean. */
    private static Table wide() {
        double[] counts = new double[120];
        String[] sites = new String[120];
        for (int i = 0; i < counts.length; i++) {
            int site = i / 6;
            double mean = 2 * Math.pow(1.45, site);
            counts[i] = Math.max(0, Math.rint(mean + Math.sqrt(2 * mean) * Math.sin(37.0 * i)));
            sites[i] = "site " + (site + 1);
        }
        return Table.of(TextColumn.of("site", sites), NumberColumn.of("sightings", counts));
    }

    private static BufferedImage decode(MimeBundle bundle) throws IOException {
        byte[] png = Base64.getDecoder().decode(bundle.get(MimeBundle.PNG).orElseThrow());
        return ImageIO.read(new ByteArrayInputStream(png));
    }

    private static void assertWellFormed(String svg) throws Exception {
        var document = DocumentBuilderFactory.newInstance()
                .newDocumentBuilder()
                .parse(new ByteArrayInputStream(svg.getBytes(StandardCharsets.UTF_8)));
        assertThat(document.getDocumentElement().getTagName()).isEqualTo("svg");
        assertThat(document.getElementsByTagName("path").getLength()).isGreaterThan(20);
        assertThat(svg).doesNotContain("NaN").doesNotContain("Infinity");
    }

    private static void assertNothingCutOrOverlapping(Layout layout) {
        Rectangle2D page = new Rectangle2D.Double(0, 0, Style.WIDTH, layout.height());
        List<Layout.Word> words = layout.words();
        List<Rectangle2D> boxes = words.stream().map(Layout.Word::bounds).toList();
        List<String> faults = new ArrayList<>();
        for (int i = 0; i < boxes.size(); i++) {
            String text = words.get(i).text();
            Rectangle2D box = boxes.get(i);
            if (!box.isEmpty() && !page.contains(box)) {
                faults.add("'" + text + "' at " + box + " is cut by the page of height " + layout.height());
            }
            if (box.intersects(layout.plot())) {
                faults.add("'" + text + "' runs into the plot");
            }
            for (int j = 0; j < i; j++) {
                if (box.intersects(boxes.get(j))) {
                    faults.add("'" + text + "' overlaps '" + words.get(j).text() + "'");
                }
            }
        }
        assertThat(faults).isEmpty();
    }

    private static void assertEdgeIsBlank(BufferedImage picture) {
        int width = picture.getWidth();
        int height = picture.getHeight();
        int inked = 0;
        for (int x = 0; x < width; x++) {
            inked += isWhite(picture, x, 0) && isWhite(picture, x, height - 1) ? 0 : 1;
        }
        for (int y = 0; y < height; y++) {
            inked += isWhite(picture, 0, y) && isWhite(picture, width - 1, y) ? 0 : 1;
        }
        assertThat(inked).as("pixels with ink on the edge of the picture").isZero();
    }

    private static boolean isWhite(BufferedImage picture, int x, int y) {
        return (picture.getRGB(x, y) & 0xFFFFFF) == 0xFFFFFF;
    }
}
