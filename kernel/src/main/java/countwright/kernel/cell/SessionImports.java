package countwright.kernel.cell;

import countwright.show.Displayable;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.List;

/** What every session imports before its first cell; the library keeps the list, next to what it shows. */
final class SessionImports {

    private static final String RESOURCE = "session-imports.txt";

    private SessionImports() {}

    /** Returns the import declarations, one a line in the file, blank lines and {@code #} comments left out. */
    static List<String> read() {
        try (InputStream in = Displayable.class.getResourceAsStream(RESOURCE)) {
            if (in == null) {
                throw new IllegalStateException(
                        "the library's " + RESOURCE + " is missing; install Countwright again.");
            }
            return new String(in.readAllBytes(), StandardCharsets.UTF_8)
                    .lines()
                    .map(String::strip)
                    .filter(line -> !line.isEmpty() && !line.startsWith("#"))
                    .toList();
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }
}
