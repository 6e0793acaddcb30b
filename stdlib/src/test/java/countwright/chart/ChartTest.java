package countwright.chart;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import countwright.model.Residual;
import java.awt.image.BufferedImage;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import javax.imageio.ImageIO;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.knowm.xchart.XYChart;

class ChartTest {

    private static final List<String> DEPOTS = SyntheticFit.depots(4);
    private static final Fit FIT = SyntheticFit.of(SyntheticFit.faults(36, DEPOTS, 0, 31), DEPOTS);

    private final Chart chart = ResidualChart.of(FIT, Residual.PEARSON);

    @TempDir
    private Path folder;

    @Test
    void save_twoExtensions_writesEachFormat() throws Exception {
        Path png = chart.save(folder.resolve("a.PNG"));
        Path svg = chart.save(folder.resolve("a.svg").toString());

        assertThat(Files.readAllBytes(png)).startsWith(0x89, 'P', 'N', 'G');
        assertThat(Files.readString(svg)).startsWith("<svg ").contains("<title>Pearson residuals");
    }

    @Test
    void save_otherExtension_namesTheTwoThereAre() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> chart.save(folder.resolve("a.pdf")))
                .withMessageContaining(".png or .svg")
                .withMessageContaining("'a.pdf'");
    }

    @Test
    void save_missingFolder_saysWhichOne() {
        assertThatThrownBy(() -> chart.save(folder.resolve("none").resolve("a.svg")))
                .isInstanceOf(UncheckedIOException.class)
                .hasMessageContaining("none does not exist");
    }

    @Test
    void display_sameFigureTwice_isTheSame() {
        assertThat(chart.display()).isEqualTo(chart.display());
    }

    @Test
    void xchart_paintsOnItsOwn() throws Exception {
        XYChart library = RateRatioChart.of(FIT).xchart();

        assertThat(library.getTitle()).isEqualTo("Rate ratios for faults");
        BufferedImage picture = new BufferedImage(library.getWidth(), library.getHeight(), BufferedImage.TYPE_INT_RGB);
        library.paint(picture.createGraphics(), library.getWidth(), library.getHeight());
        ImageIO.write(picture, "png", Path.of("target", "xchart.png").toFile());
        library.getStyler().setLegendVisible(false);
        assertThat(chart.xchart().getStyler().isLegendVisible())
                .as("another chart")
                .isTrue();
    }

    @Test
    void barePlot_placesValuesWhereTheLayoutSaysTheyAre() {
        Figure figure = chart.figure();
        Layout layout = Layout.of(figure);
        XYChart plot = new Painter(figure, layout).barePlot();
        plot.paint(new SvgGraphics(), layout.plot().width, layout.plot().height);

        for (double share : new double[] {0.0, 0.25, 0.9, 1.0}) {
            double y = figure.y().min() + share * (figure.y().max() - figure.y().min());
            assertThat(plot.getScreenYFromChart(y) + layout.plot().y).isCloseTo(layout.pageY(y), within(1.0));
        }
        for (Axis.Tick tick : figure.x().ticks()) {
            assertThat(plot.getScreenXFromChart(tick.value()) + layout.plot().x)
                    .isCloseTo(layout.pageX(tick.value()), within(1.0));
        }
    }
}
