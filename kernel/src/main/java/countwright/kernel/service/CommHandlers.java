package countwright.kernel.service;

import java.util.Optional;

/** Comms, of which this kernel offers none: an attempt to open one is answered by closing it, as the protocol asks. */
final class CommHandlers {

    private final Outbox outbox;

    CommHandlers(Outbox outbox) {
        this.outbox = outbox;
    }

    /** Answers {@code comm_info_request}. */
    Handler info() {
        return request -> {
            var reply = Replies.ok();
            reply.putObject("comms");
            return Optional.of(reply);
        };
    }

    /** Takes {@code comm_open}, which has no reply. */
    Handler open() {
        return request -> {
            var close = Replies.object().put("comm_id", request.content().text("comm_id"));
            close.putObject("data");
            outbox.publish("comm_close", request.header(), close);
            return Optional.empty();
        };
    }

    /** Takes {@code comm_msg} and {@code comm_close} for comms that are not there; they have no reply. */
    Handler ignore() {
        return request -> Optional.empty();
    }
}
