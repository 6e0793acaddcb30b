package countwright.kernel.service;

import countwright.kernel.wire.Header;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.util.Optional;
import java.util.Properties;
import tools.jackson.databind.node.ObjectNode;

/** Answers {@code kernel_info_request}: what this kernel is and which language it speaks. */
final class KernelInfo implements Handler {

    private final String version = readVersion();

    @Override
    public Optional<ObjectNode> answer(Request request) {
        String java = Runtime.version().toString();
        ObjectNode content = Replies.ok();
        content.put("protocol_version", Header.PROTOCOL_VERSION);
        content.put("implementation", "countwright");
        content.put("implementation_version", version);
        ObjectNode language = content.putObject("language_info");
        language.put("name", "java");
        language.put("version", java);
        language.put("mimetype", "text/x-java");
        language.put("file_extension", ".java");
        language.put("pygments_lexer", "java");
        language.put("codemirror_mode", "text/x-java");
        language.put("nbconvert_exporter", "script");
        content.put(
                "banner",
                "Countwright " + version + ", models for counts and rates, on Java " + java
                        + ". A cell is Java; a last expression without a semicolon is shown.");
        content.putArray("help_links");
        // There is no debugger for cells, so none is named.
        content.putArray("supported_features").add("kernel subshells");
        return Optional.of(content);
    }

    private static String readVersion() {
        Properties properties = new Properties();
        try (InputStream in = KernelInfo.class.getResourceAsStream("version.properties")) {
            if (in == null) {
                throw new IllegalStateException(
                        "version.properties is missing beside " + KernelInfo.class.getName() + ". Build with Maven.");
            }
            properties.load(in);
        } catch (IOException e) {
            throw new UncheckedIOException("version.properties cannot be read.", e);
        }
        return properties.getProperty("version", "");
    }
}
