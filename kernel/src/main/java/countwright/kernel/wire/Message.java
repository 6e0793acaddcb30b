package countwright.kernel.wire;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * One message of the protocol, without the frames that route it. The JSON trees are kept, not copied: whoever hands one
 * over, or gets one, leaves it unchanged from then on.
 */
public final class Message {

    private final Header header;
    private final Optional<Header> parent;
    private final ObjectNode metadata;
    private final ObjectNode content;
    private final List<byte[]> buffers;

    private Message(
            Header header, Optional<Header> parent, ObjectNode metadata, ObjectNode content, List<byte[]> buffers) {
        this.header = header;
        this.parent = parent;
        this.metadata = metadata;
        this.content = content;
        this.buffers = buffers;
    }

    /** Returns a message that has no cause. */
    public static Message first(Header header, ObjectNode content) {
        return new Message(header, Optional.empty(), JsonNodeFactory.instance.objectNode(), content, List.of());
    }

    /** Returns a message caused by another. */
    public static Message caused(Header header, Header parent, ObjectNode content) {
        return new Message(header, Optional.of(parent), JsonNodeFactory.instance.objectNode(), content, List.of());
    }

    static Message received(
            Header header, Optional<Header> parent, ObjectNode metadata, ObjectNode content, List<byte[]> buffers) {
        return new Message(header, parent, metadata, content, List.copyOf(buffers));
    }

    /** Returns this message with raw buffers behind its content; they are copied. */
    public Message withBuffers(List<byte[]> newBuffers) {
        List<byte[]> copies = new ArrayList<>(newBuffers.size());
        newBuffers.forEach(buffer -> copies.add(buffer.clone()));
        return new Message(header, parent, metadata, content, List.copyOf(copies));
    }

    /** Returns this message with other metadata. */
    public Message withMetadata(ObjectNode newMetadata) {
        return new Message(header, parent, newMetadata, content, buffers);
    }

    public Header header() {
        return header;
    }

    /** Returns the type of the message, such as {@code execute_request}. */
    public String type() {
        return header.type();
    }

    /** Returns the header of the message that caused this one. */
    public Optional<Header> parent() {
        return parent;
    }

    /** Returns whether this message was caused by the one with the given header. */
    public boolean isCausedBy(Header cause) {
        return parent.isPresent() && parent.get().id().equals(cause.id());
    }

    public ObjectNode metadata() {
        return metadata;
    }

    public ObjectNode content() {
        return content;
    }

    /** Returns the raw buffers; not copied, to be left unchanged. */
    public List<byte[]> buffers() {
        return buffers;
    }

    /** Returns type and id only: contents stay out of logs. */
    @Override
    public String toString() {
        return header.toString();
    }
}
