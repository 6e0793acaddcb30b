package countwright.chart;

import java.awt.Font;
import java.awt.FontFormatException;
import java.awt.GraphicsEnvironment;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.util.List;

/**
 * The typeface of all charts, carried along so that they look the same on every machine: Open Sans, regular and bold.
 *
 * <p>Java on Linux asks fontconfig for its fonts before it draws its first text, and from JDK 25 on fails where there
 * is none. A process that draws charts should therefore be started with the environment variable {@code
 * FONTCONFIG_FILE} naming a file made by {@link #writeFontconfig}.
 */
public final class Fonts {

    private static final String REGULAR = "OpenSans-Regular.ttf";
    private static final String BOLD = "OpenSans-Bold.ttf";
    private static final List<String> RESOURCES = List.of(REGULAR, BOLD, "LICENSE-OpenSans.txt");
    private static final List<String> SYSTEM_FOLDERS = List.of(
            "/usr/share/fonts",
            "/usr/local/share/fonts",
            "/usr/share/X11/fonts",
            "/System/Library/Fonts",
            "/Library/Fonts");

    private Fonts() {}

    /**
     * Writes a fontconfig file that names the system's usual font folders and our own typeface, which is copied next to
     * it. Files of an earlier call are replaced.
     *
     * @param folder where to write; made if it does not exist
     * @return the file to name in {@code FONTCONFIG_FILE}
     * @throws UncheckedIOException if the folder cannot be written
     */
    public static Path writeFontconfig(Path folder) {
        return writeFontconfig(folder, SYSTEM_FOLDERS);
    }

    static Path writeFontconfig(Path folder, List<String> systemFolders) {
        Path home = folder.toAbsolutePath().normalize();
        Path fonts = home.resolve("fonts");
        try {
            Files.createDirectories(fonts);
            for (String name : RESOURCES) {
                copy(name, fonts);
            }
            StringBuilder xml = new StringBuilder("""
                    <?xml version="1.0"?>
                    <!DOCTYPE fontconfig SYSTEM "urn:fontconfig:fonts.dtd">
                    <fontconfig>
                    """);
            for (String systemFolder : systemFolders) {
                xml.append("  <dir>").append(escaped(systemFolder)).append("</dir>\n");
            }
            xml.append("  <dir prefix=\"xdg\">fonts</dir>\n");
            xml.append("  <dir>").append(escaped(fonts.toString())).append("</dir>\n");
            xml.append("  <include ignore_missing=\"yes\">/etc/fonts/conf.d</include>\n");
            xml.append("  <cachedir>")
                    .append(escaped(home.resolve("cache").toString()))
                    .append("</cachedir>\n");
            xml.append("</fontconfig>\n");
            return Files.writeString(home.resolve("fonts.conf"), xml);
        } catch (IOException failure) {
            throw new UncheckedIOException(
                    "the fonts of charts cannot be written to " + home + " (" + failure.getMessage()
                            + "). Name a folder that this user may write to.",
                    failure);
        }
    }

    static Font regular(float size) {
        return Loaded.REGULAR_FONT.deriveFont(size);
    }

    static Font bold(float size) {
        return Loaded.BOLD_FONT.deriveFont(size);
    }

    /** Returns the font itself where it has every character of a text, else the system's sans serif of that size. */
    static Font covering(Font font, String text) {
        if (font.canDisplayUpTo(text) < 0) {
            return font;
        }
        int style = font.getFontName().contains("Bold") ? Font.BOLD : Font.PLAIN;
        return new Font(Font.SANS_SERIF, style, 1).deriveFont(font.getSize2D());
    }

    private static void copy(String name, Path folder) throws IOException {
        try (InputStream resource = open(name)) {
            // Through a file of its own: another process may be reading the old one.
            Path temporary = Files.createTempFile(folder, name, ".part");
            Files.copy(resource, temporary, StandardCopyOption.REPLACE_EXISTING);
            Files.move(temporary, folder.resolve(name), StandardCopyOption.REPLACE_EXISTING);
        }
    }

    private static InputStream open(String name) {
        InputStream resource = Fonts.class.getResourceAsStream("fonts/" + name);
        if (resource == null) {
            throw new IllegalStateException(
                    "the file countwright/chart/fonts/" + name + " is missing from the library; install it again.");
        }
        return resource;
    }

    private static String escaped(String text) {
        return text.replace("&", "&amp;").replace("<", "&lt;").replace(">", "&gt;");
    }

    /** Loads on first use, so that writing the fontconfig file needs no font system. */
    private static final class Loaded {

        static {
            // A chart is a picture in memory. Without this, a DISPLAY that cannot be reached would end in an error.
            if (System.getProperty("java.awt.headless") == null) {
                System.setProperty("java.awt.headless", "true");
            }
        }

        static final Font REGULAR_FONT = load(REGULAR);
        static final Font BOLD_FONT = load(BOLD);

        private static Font load(String name) {
            try (InputStream resource = open(name)) {
                Font font = Font.createFont(Font.TRUETYPE_FONT, resource);
                GraphicsEnvironment.getLocalGraphicsEnvironment().registerFont(font);
                return font;
            } catch (IOException | FontFormatException failure) {
                throw new IllegalStateException(
                        "the font " + name + " cannot be read: " + failure.getMessage(), failure);
            }
        }
    }
}
