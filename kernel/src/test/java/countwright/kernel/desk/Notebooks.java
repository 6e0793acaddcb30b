package countwright.kernel.desk;

import java.util.ArrayList;
import java.util.List;
import java.util.OptionalInt;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/** Notebooks for tests. */
final class Notebooks {

    private Notebooks() {}

    static Notebook of(Cell... cells) {
        return new Notebook(object(), List.of(cells));
    }

    static Notebook ofCode(String... sources) {
        List<Cell> cells = new ArrayList<>();
        for (String source : sources) {
            cells.add(code("cell-" + (cells.size() + 1), source));
        }
        return new Notebook(object(), cells);
    }

    static Cell.Markdown markdown(String source) {
        return new Cell.Markdown("text", source, object(), object());
    }

    static Cell.Code code(String id, String source, Output... outputs) {
        return new Cell.Code(id, source, object(), OptionalInt.of(1), List.of(outputs));
    }

    static Output.Shown shown(String mediaType, String content) {
        return new Output.Shown(
                OptionalInt.empty(), object().put("text/plain", "plain").put(mediaType, content), object());
    }

    static ObjectNode object() {
        return JsonNodeFactory.instance.objectNode();
    }
}
