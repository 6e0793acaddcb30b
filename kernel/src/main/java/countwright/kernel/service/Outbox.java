package countwright.kernel.service;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.Envelope;
import countwright.kernel.wire.Header;
import countwright.kernel.wire.KernelSockets;
import countwright.kernel.wire.Message;
import countwright.kernel.wire.Route;
import java.util.Optional;
import tools.jackson.databind.node.ObjectNode;

/**
 * Everything the kernel says: replies, published messages and the busy and idle around each request.
 *
 * <p>Other requests are answered while a cell runs, each with its own busy and idle. Front ends show the last state they
 * heard, whatever its cause, and servers stop kernels that look idle for long; so after such an idle the cell's busy is
 * said again. Used by any thread.
 */
final class Outbox {

    private static final String USERNAME = "countwright";

    private final KernelSockets sockets;
    private Optional<Header> runningCell = Optional.empty();

    Outbox(KernelSockets sockets) {
        this.sockets = sockets;
    }

    void reply(Request request, ObjectNode content) {
        Message reply = Message.caused(header(request.replyType()), request.header(), content);
        sockets.send(request.channel(), new Envelope(request.route(), reply));
    }

    void publish(String type, Header cause, ObjectNode content) {
        sockets.send(Channel.IOPUB, published(type, cause, content));
    }

    /** Publishes what a cell says, waiting while the front ends that read are far behind. */
    void publishWhenRoom(String type, Header cause, ObjectNode content) {
        sockets.sendWhenRoom(Channel.IOPUB, published(type, cause, content));
    }

    /** Lets what waits to be published through, because something urgent stands behind it. */
    void hurry() {
        sockets.hurry();
    }

    private Envelope published(String type, Header cause, ObjectNode content) {
        Route topic = Route.topic("kernel." + sockets.session() + "." + type);
        return new Envelope(topic, Message.caused(header(type), cause, content));
    }

    /** Publishes something that no request has caused. */
    void publish(String type, ObjectNode content) {
        Route topic = Route.topic("kernel." + sockets.session() + "." + type);
        sockets.send(Channel.IOPUB, new Envelope(topic, Message.first(header(type), content)));
    }

    synchronized void busy(Header cause) {
        status("busy", cause);
    }

    synchronized void idle(Header cause) {
        status("idle", cause);
        runningCell.ifPresent(cell -> status("busy", cell));
    }

    synchronized void cellBusy(Header cell) {
        runningCell = Optional.of(cell);
        status("busy", cell);
    }

    synchronized void cellIdle(Header cell) {
        runningCell = Optional.empty();
        status("idle", cell);
    }

    /** Sends a question to one front end and returns the question's header. */
    Header ask(Route route, Header cause, ObjectNode content, Runnable undeliverable) {
        Header header = header("input_request");
        sockets.ask(new Envelope(route, Message.caused(header, cause, content)), undeliverable);
        return header;
    }

    private void status(String state, Header cause) {
        publish("status", cause, Replies.object().put("execution_state", state));
    }

    private Header header(String type) {
        return Header.create(type, sockets.session(), USERNAME);
    }
}
