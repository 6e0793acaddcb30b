package countwright.kernel.desk;

import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.OptionalInt;
import java.util.Set;
import java.util.regex.Pattern;
import tools.jackson.core.JacksonException;
import tools.jackson.core.TokenStreamLocation;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * Reads format 4 leniently: a missing part gets its empty value, a missing or repeated cell id is replaced, an unknown
 * output is left out. Only what would lose a cell is refused.
 */
final class NotebookReader {

    static final Pattern CELL_ID = Pattern.compile("[a-zA-Z0-9_-]{1,64}");

    private static final JsonMapper JSON = JsonMapper.builder().build();

    private final String name;
    private final Set<String> idsGiven = new HashSet<>();
    private final Set<String> idsUsed = new HashSet<>();

    NotebookReader(String name) {
        this.name = name;
    }

    Notebook read(String json) {
        JsonNode root = parse(json);
        JsonNode major = root.path("nbformat");
        if (!root.isObject() || !major.isIntegralNumber()) {
            throw new DeskException(name + " is JSON, but not a notebook: it has no 'nbformat' number.");
        }
        if (major.intValue() != 4) {
            throw new DeskException(name + " is a notebook of format " + major.intValue()
                    + "; format 4 is read here. Open it in a notebook front end and save it to bring it to format 4.");
        }
        JsonNode cells = root.path("cells");
        if (!cells.isArray()) {
            throw new DeskException(name + " has no list of cells.");
        }
        cells.forEach(cell -> idsGiven.add(cell.path("id").asString("")));
        List<Cell> read = new ArrayList<>();
        for (JsonNode cell : cells) {
            read.add(cell(cell, read.size() + 1));
        }
        return new Notebook(object(root.path("metadata")), read);
    }

    private JsonNode parse(String json) {
        try {
            return JSON.readTree(json);
        } catch (JacksonException e) {
            TokenStreamLocation place = e.getLocation();
            String where = place == null ? "" : " at line " + place.getLineNr() + ", column " + place.getColumnNr();
            throw new DeskException(
                    name + " is not a notebook: it is not valid JSON" + where + " (" + e.getOriginalMessage() + ").",
                    e);
        }
    }

    private Cell cell(JsonNode cell, int number) {
        String type = cell.path("cell_type").asString("");
        String id = id(cell.path("id").asString(""), number);
        String source = text(cell.path("source"));
        ObjectNode metadata = object(cell.path("metadata"));
        ObjectNode attachments = object(cell.path("attachments"));
        return switch (type) {
            case "markdown" -> new Cell.Markdown(id, source, metadata, attachments);
            case "raw" -> new Cell.Raw(id, source, metadata, attachments);
            case "code" ->
                new Cell.Code(id, source, metadata, count(cell.path("execution_count")), outputs(cell.path("outputs")));
            default ->
                throw new DeskException("cell " + number + " of " + name + " is of the unknown type '" + type
                        + "'; markdown, code and raw are known.");
        };
    }

    /** Ids came with format 4.5; those made here depend on the place of the cell only, so a rerun gives the same. */
    private String id(String given, int number) {
        if (CELL_ID.matcher(given).matches() && idsUsed.add(given)) {
            return given;
        }
        String made = "cell-" + number;
        for (int copy = 2; idsGiven.contains(made) || !idsUsed.add(made); copy++) {
            made = "cell-" + number + "-" + copy;
        }
        return made;
    }

    private static List<Output> outputs(JsonNode outputs) {
        List<Output> read = new ArrayList<>();
        for (JsonNode output : outputs) {
            switch (output.path("output_type").asString("")) {
                case "stream" ->
                    read.add(new Output.Text(output.path("name").asString("stdout"), text(output.path("text"))));
                case "display_data" -> read.add(shown(OptionalInt.empty(), output));
                case "execute_result" -> read.add(shown(count(output.path("execution_count")), output));
                case "error" ->
                    read.add(new Output.Failed(
                            output.path("ename").asString("Error"),
                            output.path("evalue").asString(""),
                            lines(output.path("traceback"))));
                default -> {
                    // A later minor revision may add kinds of output; the run replaces all outputs anyway.
                }
            }
        }
        return read;
    }

    private static Output shown(OptionalInt executionCount, JsonNode output) {
        ObjectNode data = object(output.path("data")).deepCopy();
        for (String mediaType : List.copyOf(data.propertyNames())) {
            if (!isJson(mediaType)) {
                data.put(mediaType, text(data.path(mediaType)));
            }
        }
        return new Output.Shown(executionCount, data, object(output.path("metadata")));
    }

    static boolean isJson(String mediaType) {
        return mediaType.equals("application/json") || mediaType.endsWith("+json");
    }

    private static List<String> lines(JsonNode traceback) {
        List<String> lines = new ArrayList<>();
        traceback.forEach(line -> lines.add(line.asString("")));
        return lines;
    }

    /** Text is stored as one string or as a list of lines that keep their line ends. */
    private static String text(JsonNode stored) {
        if (!stored.isArray()) {
            return stored.asString("");
        }
        StringBuilder joined = new StringBuilder();
        stored.forEach(line -> joined.append(line.asString("")));
        return joined.toString();
    }

    private static OptionalInt count(JsonNode stored) {
        return stored.isIntegralNumber() && stored.intValue() >= 0
                ? OptionalInt.of(stored.intValue())
                : OptionalInt.empty();
    }

    private static ObjectNode object(JsonNode stored) {
        return stored instanceof ObjectNode object ? object : JsonNodeFactory.instance.objectNode();
    }
}
