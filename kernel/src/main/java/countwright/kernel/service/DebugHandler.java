package countwright.kernel.service;

import java.util.Optional;
import tools.jackson.databind.node.ObjectNode;

/**
 * Answers {@code debug_request}: there is no debugger for cells, and supported_features names none. The reply says so in
 * the protocol's form and in that of the Debug Adapter Protocol, whose messages these requests carry.
 */
final class DebugHandler implements Handler {

    private static final String ANSWER = "This kernel has no debugger for cells.";

    @Override
    public Optional<ObjectNode> answer(Request request) {
        ObjectNode reply = Replies.error("NotSupported", ANSWER);
        reply.put("type", "response");
        reply.put("success", false);
        reply.put("message", ANSWER);
        request.content().integer("seq").ifPresent(seq -> reply.put("request_seq", seq));
        reply.put("command", request.content().text("command", ""));
        return Optional.of(reply);
    }
}
