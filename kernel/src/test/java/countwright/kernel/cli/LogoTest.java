package countwright.kernel.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.awt.image.BufferedImage;
import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.Objects;
import javax.imageio.ImageIO;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledIfSystemProperty;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class LogoTest {

    @Test
    void svgFile_isWhatTheDrawingGives() throws IOException {
        try (InputStream in = resource("logo-svg.svg")) {
            assertThat(new String(in.readAllBytes(), StandardCharsets.UTF_8)).isEqualTo(Logo.svg());
        }
    }

    @ParameterizedTest
    @ValueSource(ints = {32, 64})
    void pngFile_isWhatTheDrawingGives(int side) throws IOException {
        BufferedImage stored;
        try (InputStream in = resource("logo-" + side + "x" + side + ".png")) {
            stored = ImageIO.read(in);
        }
        BufferedImage drawn = Logo.png(side);
        assertThat(stored.getWidth()).isEqualTo(side);
        assertThat(stored.getHeight()).isEqualTo(side);
        for (int y = 0; y < side; y++) {
            for (int x = 0; x < side; x++) {
                // Java releases smooth edges a little differently; a shape moved or recoloured differs by far more.
                assertThat(distance(stored.getRGB(x, y), drawn.getRGB(x, y)))
                        .as("pixel %d, %d", x, y)
                        .isLessThan(40);
            }
        }
    }

    /** Not a check: draws the files anew after a change of the drawing, with -Dlogo.folder=src/main/resources/... */
    @Test
    @EnabledIfSystemProperty(named = "logo.folder", matches = ".+")
    void files_onRequest_areDrawnAnew() throws IOException {
        Path folder = Path.of(System.getProperty("logo.folder"));
        Logo.write(folder);
        assertThat(folder.resolve("logo-64x64.png")).exists();
    }

    private static int distance(int stored, int drawn) {
        int largest = 0;
        for (int shift = 0; shift < 32; shift += 8) {
            largest = Math.max(largest, Math.abs((stored >> shift & 0xFF) - (drawn >> shift & 0xFF)));
        }
        return largest;
    }

    private static InputStream resource(String logo) {
        return Objects.requireNonNull(LogoTest.class.getResourceAsStream("kernelspec/" + logo), logo);
    }
}
