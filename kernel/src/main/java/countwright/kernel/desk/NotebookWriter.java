package countwright.kernel.desk;

import java.util.OptionalInt;
import java.util.TreeMap;
import tools.jackson.core.util.DefaultIndenter;
import tools.jackson.core.util.DefaultPrettyPrinter;
import tools.jackson.core.util.Separators;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * Writes format 4.5. Keys are sorted and long text is split into lines, so that two runs of a notebook differ in a
 * version control system only where they differ.
 */
final class NotebookWriter {

    private static final JsonNodeFactory NODES = JsonNodeFactory.instance;
    private static final JsonMapper JSON = JsonMapper.builder().build();

    private NotebookWriter() {}

    static String write(Notebook notebook) {
        ObjectNode root = NODES.objectNode();
        ArrayNode cells = root.putArray("cells");
        notebook.cells().forEach(cell -> cells.add(cell(cell)));
        root.set("metadata", metadata(notebook.metadata()));
        root.put("nbformat", 4);
        root.put("nbformat_minor", 5);
        return JSON.writer().with(printer()).writeValueAsString(sorted(root)) + "\n";
    }

    /** What the format itself demands of two well-known keys is made good here: a name each. */
    private static ObjectNode metadata(ObjectNode given) {
        ObjectNode metadata = given.deepCopy();
        metadata.remove("orig_nbformat");
        if (!metadata.path("kernelspec").path("name").isString()
                || !metadata.path("kernelspec").path("display_name").isString()) {
            metadata.remove("kernelspec");
        }
        if (!metadata.path("language_info").path("name").isString()) {
            metadata.remove("language_info");
        }
        return metadata;
    }

    private static ObjectNode cell(Cell cell) {
        ObjectNode json = NODES.objectNode();
        json.put("id", cell.id());
        json.set("metadata", cell.metadata());
        json.set("source", lines(cell.source()));
        if (cell instanceof Cell.Markdown markdown) {
            json.put("cell_type", "markdown");
            attach(json, markdown.attachments());
        } else if (cell instanceof Cell.Raw raw) {
            json.put("cell_type", "raw");
            attach(json, raw.attachments());
        } else if (cell instanceof Cell.Code code) {
            json.put("cell_type", "code");
            putCount(json, code.executionCount());
            ArrayNode outputs = json.putArray("outputs");
            code.outputs().forEach(output -> outputs.add(output(output)));
        }
        return json;
    }

    private static void attach(ObjectNode json, ObjectNode attachments) {
        if (!attachments.isEmpty()) {
            json.set("attachments", attachments);
        }
    }

    private static ObjectNode output(Output output) {
        ObjectNode json = NODES.objectNode();
        if (output instanceof Output.Text text) {
            json.put("output_type", "stream");
            json.put("name", text.stream());
            json.set("text", lines(text.text()));
        } else if (output instanceof Output.Failed failed) {
            json.put("output_type", "error");
            json.put("ename", failed.name());
            json.put("evalue", failed.message());
            ArrayNode traceback = json.putArray("traceback");
            failed.traceback().forEach(traceback::add);
        } else if (output instanceof Output.Shown shown) {
            if (shown.executionCount().isPresent()) {
                json.put("output_type", "execute_result");
                putCount(json, shown.executionCount());
            } else {
                json.put("output_type", "display_data");
            }
            json.set("data", data(shown.data()));
            json.set("metadata", shown.metadata());
        }
        return json;
    }

    private static ObjectNode data(ObjectNode forms) {
        ObjectNode data = NODES.objectNode();
        forms.forEachEntry((mediaType, form) ->
                data.set(mediaType, form.isString() && !NotebookReader.isJson(mediaType) ? form(form) : form));
        return data;
    }

    private static JsonNode form(JsonNode form) {
        String text = form.stringValue();
        return text.indexOf('\n') < 0 ? form : lines(text);
    }

    private static void putCount(ObjectNode json, OptionalInt count) {
        if (count.isPresent()) {
            json.put("execution_count", count.getAsInt());
        } else {
            json.putNull("execution_count");
        }
    }

    private static ArrayNode lines(String text) {
        ArrayNode lines = NODES.arrayNode();
        int start = 0;
        for (int end = text.indexOf('\n'); end >= 0; end = text.indexOf('\n', start)) {
            lines.add(text.substring(start, end + 1));
            start = end + 1;
        }
        if (start < text.length()) {
            lines.add(text.substring(start));
        }
        return lines;
    }

    private static JsonNode sorted(JsonNode node) {
        if (node instanceof ObjectNode object) {
            TreeMap<String, JsonNode> byName = new TreeMap<>();
            object.forEachEntry((name, value) -> byName.put(name, sorted(value)));
            ObjectNode sorted = NODES.objectNode();
            byName.forEach(sorted::set);
            return sorted;
        }
        if (node instanceof ArrayNode array) {
            ArrayNode sorted = NODES.arrayNode();
            array.forEach(element -> sorted.add(sorted(element)));
            return sorted;
        }
        return node;
    }

    private static DefaultPrettyPrinter printer() {
        DefaultIndenter oneSpace = new DefaultIndenter(" ", "\n");
        return new DefaultPrettyPrinter(Separators.createDefaultInstance()
                        .withObjectNameValueSpacing(Separators.Spacing.AFTER)
                        .withObjectEmptySeparator("")
                        .withArrayEmptySeparator(""))
                .withObjectIndenter(oneSpace)
                .withArrayIndenter(oneSpace);
    }
}
