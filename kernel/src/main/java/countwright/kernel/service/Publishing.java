package countwright.kernel.service;

import countwright.kernel.cell.CellListener;
import countwright.kernel.wire.Header;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.Optional;
import tools.jackson.databind.node.ObjectNode;

/**
 * What running code says, as messages under the request that caused it. Each waits while the front ends that read are far
 * behind.
 */
final class Publishing {

    /** A flood goes in pieces, so that front ends show it as it comes and no message is large. */
    private static final int LONGEST_TEXT = 256 << 10;

    private final Header cause;
    private final Outbox outbox;

    Publishing(Header cause, Outbox outbox) {
        this.cause = cause;
        this.outbox = outbox;
    }

    void output(CellListener.Stream stream, String text) {
        String name = stream == CellListener.Stream.OUT ? "stdout" : "stderr";
        for (int start = 0; start < text.length(); ) {
            int end = CodePoints.cut(text, start, LONGEST_TEXT);
            publish("stream", Replies.object().put("name", name).put("text", text.substring(start, end)));
            start = end;
        }
    }

    void display(MimeBundle bundle, Optional<String> displayId) {
        ObjectNode content = Replies.object();
        Replies.putBundle(content, bundle);
        ObjectNode transientPart = content.putObject("transient");
        displayId.ifPresent(id -> transientPart.put("display_id", id));
        publish("display_data", content);
    }

    void update(MimeBundle bundle, String displayId) {
        ObjectNode content = Replies.object();
        Replies.putBundle(content, bundle);
        content.putObject("transient").put("display_id", displayId);
        publish("update_display_data", content);
    }

    void clear(Stage.Clearing when) {
        publish("clear_output", Replies.object().put("wait", when == Stage.Clearing.BEFORE_NEXT));
    }

    void publish(String type, ObjectNode content) {
        outbox.publishWhenRoom(type, cause, content);
    }
}
