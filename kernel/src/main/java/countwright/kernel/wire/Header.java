package countwright.kernel.wire;

import java.time.Instant;
import java.time.temporal.ChronoUnit;
import java.util.Optional;
import java.util.UUID;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * Who sent a message, when, and of which type. A received header keeps fields unknown to us, because a reply must carry
 * its parent's header whole. Immutable.
 */
public final class Header {

    /** The version of the messaging protocol spoken here. */
    public static final String PROTOCOL_VERSION = "5.5";

    private final ObjectNode json;

    private Header(ObjectNode json) {
        this.json = json;
    }

    /** Returns a header with a fresh id and the time of now. */
    public static Header create(String type, String session, String username) {
        ObjectNode json = JsonNodeFactory.instance.objectNode();
        json.put("msg_id", UUID.randomUUID().toString());
        json.put("msg_type", type);
        json.put("session", session);
        json.put("username", username);
        // Microseconds at most: the reference client's date pattern takes no more digits.
        json.put("date", Instant.now().truncatedTo(ChronoUnit.MICROS).toString());
        json.put("version", PROTOCOL_VERSION);
        return new Header(json);
    }

    /** Returns this header as that of a request to a subshell. */
    public Header toSubshell(String id) {
        return new Header(toJson().put("subshell_id", id));
    }

    static Header received(ObjectNode json) throws MalformedMessageException {
        for (String field : new String[] {"msg_id", "msg_type"}) {
            JsonNode value = json.path(field);
            if (!value.isString() || value.stringValue().isEmpty()) {
                throw new MalformedMessageException("its header has no text in " + field);
            }
        }
        return new Header(json);
    }

    /** Returns the header of the message's cause; empty if the message has none. */
    static Optional<Header> receivedParent(ObjectNode json) throws MalformedMessageException {
        return json.isEmpty() ? Optional.empty() : Optional.of(received(json));
    }

    /** Returns the id of the message, never empty. */
    public String id() {
        return text("msg_id");
    }

    /** Returns the type of the message, such as {@code execute_request}; never empty. */
    public String type() {
        return text("msg_type");
    }

    /** Returns the session of the sender; empty if it gave none. */
    public String session() {
        return text("session");
    }

    /** Returns the name of the sender's user; empty if it gave none. */
    public String username() {
        return text("username");
    }

    /** Returns the id of the subshell as it was sent, of whatever type; missing or null for the main shell. */
    public JsonNode subshell() {
        return json.path("subshell_id");
    }

    /** Returns a copy of the whole header as JSON. */
    public ObjectNode toJson() {
        return json.deepCopy();
    }

    private String text(String field) {
        return json.path(field).stringValue("");
    }

    ObjectNode json() {
        return json;
    }

    @Override
    public boolean equals(Object other) {
        return other instanceof Header that && json.equals(that.json);
    }

    @Override
    public int hashCode() {
        return json.hashCode();
    }

    @Override
    public String toString() {
        return type() + " " + id();
    }
}
