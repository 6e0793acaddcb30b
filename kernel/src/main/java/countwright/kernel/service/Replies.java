package countwright.kernel.service;

import countwright.kernel.cell.CellOutcome;
import countwright.kernel.wire.JsonText;
import countwright.show.MimeBundle;
import java.util.List;
import tools.jackson.core.JacksonException;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/** The pieces that replies and published messages are made of. */
final class Replies {

    private Replies() {}

    static ObjectNode object() {
        return JsonNodeFactory.instance.objectNode();
    }

    static ObjectNode ok() {
        return object().put("status", "ok");
    }

    static ObjectNode aborted() {
        return object().put("status", "aborted");
    }

    static ObjectNode error(CellOutcome.Failure failure) {
        ObjectNode content = object().put("status", "error");
        putError(content, failure);
        return content;
    }

    static ObjectNode error(String name, String message) {
        return error(new CellOutcome.Failure(name, message, List.of(message)));
    }

    static void putError(ObjectNode content, CellOutcome.Failure failure) {
        content.put("ename", failure.name());
        content.put("evalue", failure.message());
        ArrayNode traceback = content.putArray("traceback");
        failure.traceback().forEach(traceback::add);
    }

    /** Puts data and metadata of a bundle. */
    static void putBundle(ObjectNode content, MimeBundle bundle) {
        putData(content, bundle);
        content.set("metadata", JsonText.tree(bundle.metadata()));
    }

    static void putData(ObjectNode content, MimeBundle bundle) {
        ObjectNode data = content.putObject("data");
        bundle.data().forEach((type, form) -> data.set(type, form(type, form)));
    }

    /** JSON forms travel as JSON, all others as text. */
    private static JsonNode form(String mediaType, String form) {
        if (mediaType.equals("application/json") || mediaType.endsWith("+json")) {
            try {
                return JsonText.standard().read(form);
            } catch (JacksonException e) {
                return JsonNodeFactory.instance.stringNode(form);
            }
        }
        return JsonNodeFactory.instance.stringNode(form);
    }
}
