package countwright.kernel.service;

import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.util.Optional;
import tools.jackson.databind.node.ObjectNode;

/** Wraps a handler so that a wrong request or a fault of ours still ends in a reply. */
final class SafeAnswer implements Handler {

    private static final Logger LOG = System.getLogger(SafeAnswer.class.getName());

    private final Handler handler;

    SafeAnswer(Handler handler) {
        this.handler = handler;
    }

    @Override
    public Optional<ObjectNode> answer(Request request) {
        try {
            return handler.answer(request);
        } catch (BadRequestException e) {
            String reason = Optional.ofNullable(e.getMessage()).orElse("It is not as the protocol says.");
            // The reason may quote the request, which the log must not.
            LOG.log(Level.WARNING, "Refused a " + request.type() + ": its content is not as the protocol says.");
            return failed(request, "BadRequest", reason);
        } catch (RuntimeException | Error e) {
            // Errors too: the compiler runs in this process, and code nested deeply enough overflows its stack.
            LOG.log(Level.ERROR, "A " + request.type() + " could not be answered.", e);
            return failed(
                    request,
                    "KernelError",
                    "The kernel failed to answer " + request.type() + "; its log has the details.");
        }
    }

    private static Optional<ObjectNode> failed(Request request, String name, String message) {
        return request.type().endsWith("_request") ? Optional.of(Replies.error(name, message)) : Optional.empty();
    }
}
