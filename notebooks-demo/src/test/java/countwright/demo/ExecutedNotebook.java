package countwright.demo;

import java.nio.file.Path;
import java.util.List;
import java.util.stream.Collectors;
import java.util.stream.Stream;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;
import tools.jackson.databind.node.JsonNodeFactory;

/** An executed notebook, read as any tool that knows the format would. */
final class ExecutedNotebook {

    private final JsonNode root;

    private ExecutedNotebook(JsonNode root) {
        this.root = root;
    }

    /** Returns a notebook without cells, to stand for one that has not been run yet. */
    static ExecutedNotebook none() {
        return new ExecutedNotebook(JsonNodeFactory.instance.objectNode());
    }

    static ExecutedNotebook read(Path file) {
        return new ExecutedNotebook(JsonMapper.shared().readTree(file.toFile()));
    }

    JsonNode root() {
        return root;
    }

    List<JsonNode> codeCells() {
        return root.path("cells")
                .valueStream()
                .filter(cell -> cell.path("cell_type").asString("").equals("code"))
                .toList();
    }

    List<JsonNode> outputs() {
        return codeCells().stream().flatMap(ExecutedNotebook::outputsOf).toList();
    }

    /** Returns what a cell has printed. */
    String printed(String id) {
        return outputsOf(cell(id))
                .filter(output -> output.path("output_type").asString("").equals("stream"))
                .map(output -> text(output.path("text")))
                .collect(Collectors.joining());
    }

    /** Returns the plain text of what a cell has shown or returned. */
    String shown(String id) {
        return outputsOf(cell(id))
                .filter(output -> output.has("data"))
                .map(output -> text(output.path("data").path("text/plain")))
                .collect(Collectors.joining("\n"));
    }

    private JsonNode cell(String id) {
        return codeCells().stream()
                .filter(cell -> cell.path("id").asString("").equals(id))
                .findFirst()
                .orElseThrow(() -> new AssertionError("the notebook has no code cell '" + id + "'"));
    }

    private static Stream<JsonNode> outputsOf(JsonNode cell) {
        return cell.path("outputs").valueStream();
    }

    /** Returns a text of the notebook, which the format allows to be cut into lines. */
    static String text(JsonNode text) {
        return text.isArray()
                ? text.valueStream().map(line -> line.asString("")).collect(Collectors.joining())
                : text.asString("");
    }
}
