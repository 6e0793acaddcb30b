package countwright.chart;

import static org.assertj.core.api.Assertions.assertThat;

import java.awt.image.BufferedImage;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.concurrent.TimeUnit;
import javax.imageio.ImageIO;
import javax.xml.parsers.DocumentBuilderFactory;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class FontsTest {

    @TempDir
    private Path folder;

    @Test
    void writeFontconfig_newFolder_holdsFontsAndNamesThem() throws Exception {
        Path file = Fonts.writeFontconfig(folder.resolve("deep").resolve("er"));

        assertThat(file).hasFileName("fonts.conf").content().contains("<dir>/usr/share/fonts</dir>", "<dir>" + folder);
        assertThat(file.resolveSibling("fonts")).isDirectoryContaining("glob:**/OpenSans-Regular.ttf");
        assertThat(file.resolveSibling("fonts").resolve("LICENSE-OpenSans.txt"))
                .content()
                .contains("Apache License");
    }

    @Test
    void writeFontconfig_folderNameWithMarkup_isWellFormed() throws Exception {
        Path file = Fonts.writeFontconfig(folder.resolve("R&D"));

        var parser = DocumentBuilderFactory.newInstance().newDocumentBuilder();
        parser.setEntityResolver((publicId, systemId) -> new org.xml.sax.InputSource(new java.io.StringReader("")));
        assertThat(parser.parse(file.toFile()).getDocumentElement().getTagName())
                .isEqualTo("fontconfig");
    }

    @Test
    void writeFontconfig_twice_replaces() {
        assertThat(Fonts.writeFontconfig(folder)).isEqualTo(Fonts.writeFontconfig(folder));
    }

    @Test
    void chart_machineWithoutFonts_looksTheSame() throws Exception {
        Path fontconfig =
                Fonts.writeFontconfig(folder, List.of(folder.resolve("empty").toString()));
        Path bare = folder.resolve("bare.png");

        Run run = draw(fontconfig, bare);

        assertThat(run.exitCode()).as(run.output()).isZero();
        Path here = folder.resolve("here.png");
        BareMachine.main(new String[] {here.toString()});
        assertThat(pixels(bare)).isEqualTo(pixels(here));
    }

    @Test
    void chart_noFontAtAll_drawsOrSaysWhatToDo() throws Exception {
        Path nothing = Files.writeString(folder.resolve("nothing.conf"), "<fontconfig></fontconfig>");

        Run run = draw(nothing, folder.resolve("nothing.png"));

        // Older runtimes draw with the typeface we carry; newer ones cannot start their fonts without fontconfig.
        if (run.exitCode() != 0) {
            assertThat(run.output()).contains("Fonts.writeFontconfig(folder)").contains("FONTCONFIG_FILE");
        }
    }

    private record Run(int exitCode, String output) {}

    private Run draw(Path fontconfig, Path picture) throws Exception {
        Path output = folder.resolve("output.txt");
        ProcessBuilder builder = new ProcessBuilder(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-cp",
                System.getProperty("java.class.path"),
                "countwright.chart.BareMachine",
                picture.toString());
        builder.environment().put("FONTCONFIG_FILE", fontconfig.toString());
        builder.environment().put("XDG_DATA_HOME", folder.resolve("no-data").toString());
        builder.environment().remove("DISPLAY");
        Process process = builder.redirectErrorStream(true)
                .redirectOutput(output.toFile())
                .start();
        boolean ended = process.waitFor(120, TimeUnit.SECONDS);
        if (!ended) {
            process.destroyForcibly();
        }
        assertThat(ended).as("the drawing process ended in time").isTrue();
        return new Run(process.exitValue(), Files.readString(output));
    }

    private static int[] pixels(Path picture) throws Exception {
        BufferedImage image = ImageIO.read(picture.toFile());
        return image.getRGB(0, 0, image.getWidth(), image.getHeight(), null, 0, image.getWidth());
    }
}
