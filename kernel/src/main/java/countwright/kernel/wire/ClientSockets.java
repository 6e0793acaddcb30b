package countwright.kernel.wire;

import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.nio.charset.StandardCharsets;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.UUID;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ConcurrentHashMap;
import org.zeromq.SocketType;
import org.zeromq.ZMQ;
import tools.jackson.databind.node.ObjectNode;

/**
 * A front end's five sockets, connected to a kernel that may not listen yet: what is sent before is kept until it does.
 *
 * <p>Every message from the kernel goes to the one receiver given at the start, on the thread that owns the socket; on
 * each channel in the order in which they were sent. Shell replies and iopub messages come on different sockets, so
 * a reply may overtake the output of its cell: the output is whole once iopub's {@code status: idle} for it is there.
 * Everything here may be called by any thread and returns at once, but for {@link #close}.
 */
public final class ClientSockets implements AutoCloseable {

    private static final Logger LOG = System.getLogger(ClientSockets.class.getName());
    private static final int LINGER_MILLIS = 1000;

    /**
     * JeroMQ 0.6.0 now and then leaves a freshly made connection idle without shaking hands (its issue tracker, number
     * 1022; measured here at one in a hundred on a busy machine), and by default notices after 30 s. Noticing early
     * costs nothing: queued messages wait for the next attempt. Only the connecting side is affected.
     */
    private static final int HANDSHAKE_MILLIS = 400;

    private final ZMQ.Context context = ZMQ.context(1);
    private final SocketLoops loops = new SocketLoops();
    private final Map<String, CompletableFuture<Void>> beats = new ConcurrentHashMap<>();
    private final CompletableFuture<Void> subscribed = new CompletableFuture<>();
    private final MessageCodec codec;
    private final String session = UUID.randomUUID().toString();
    private final String username;

    private ClientSockets(ConnectionFile connection, String username) {
        this.codec = new MessageCodec(connection.key(), WireLimits.STANDARD);
        this.username = username;
    }

    /** Connects all sockets, subscribes to everything the kernel publishes, and starts to receive. */
    public static ClientSockets connect(ConnectionFile connection, String username, Deliveries deliveries) {
        if (connection.transport() != Transport.TCP) {
            throw new IllegalArgumentException("a client of ours connects by tcp only, not by "
                    + connection.transport().protocolName() + ".");
        }
        ClientSockets sockets = new ClientSockets(connection, username);
        Map<Channel, ZMQ.Socket> connected = new EnumMap<>(Channel.class);
        for (Channel channel : Channel.values()) {
            connected.put(channel, sockets.connected(channel, connection));
        }
        connected.forEach((channel, socket) -> sockets.loops.add(
                channel,
                new SocketLoop(
                        "client-" + channel.protocolName(),
                        sockets.context,
                        socket,
                        WireLimits.STANDARD,
                        frames -> sockets.receive(channel, frames, deliveries))));
        for (Channel channel : Channel.values()) {
            sockets.loops.on(channel).start();
        }
        return sockets;
    }

    /** Returns the session id that this front end's messages carry. */
    public String session() {
        return session;
    }

    /** Returns a new request of this session, to be passed to {@link #send}. */
    public Message request(String type, ObjectNode content) {
        return Message.first(Header.create(type, session, username), content);
    }

    /** Returns a new request of this session to a subshell, to be passed to {@link #send}. */
    public Message request(String subshell, String type, ObjectNode content) {
        return Message.first(Header.create(type, session, username).toSubshell(subshell), content);
    }

    /** Returns a new answer to a message of the kernel, such as an {@code input_request}. */
    public Message answer(String type, Message question, ObjectNode content) {
        return Message.caused(Header.create(type, session, username), question.header(), content);
    }

    /** Sends a message on shell, control or stdin. */
    public void send(Channel channel, Message message) {
        if (channel == Channel.IOPUB || channel == Channel.HEARTBEAT) {
            throw new IllegalArgumentException(
                    "a front end sends on shell, control and stdin, not on " + channel.protocolName() + ".");
        }
        loops.on(channel).send(codec.encode(new Envelope(Route.none(), message)));
    }

    /**
     * Completes when the kernel has confirmed the subscription to iopub: from then on no output is missed. Kernels older
     * than protocol 5.4 never confirm, so wait with a limit.
     */
    public CompletableFuture<Void> subscribed() {
        return subscribed.copy();
    }

    /** Sends a heartbeat; completes when it comes back. Wait with a limit. */
    public CompletableFuture<Void> beat() {
        String token = UUID.randomUUID().toString();
        CompletableFuture<Void> echo = new CompletableFuture<>();
        beats.put(token, echo);
        // The empty frame is what a REQ socket would send; unlike one, this socket survives a lost echo.
        loops.on(Channel.HEARTBEAT).send(List.of(new byte[0], token.getBytes(StandardCharsets.US_ASCII)));
        return echo.whenComplete((done, failure) -> beats.remove(token));
    }

    /** Sends what is still queued, waiting a second at most, and closes all sockets. */
    @Override
    public void close() {
        loops.close(context);
    }

    private ZMQ.Socket connected(Channel channel, ConnectionFile connection) {
        ZMQ.Socket socket = context.socket(channel == Channel.IOPUB ? SocketType.SUB : SocketType.DEALER);
        // Subscriptions and heartbeats that never reached a dead kernel must not hold up the end.
        boolean sendsRequests = channel != Channel.IOPUB && channel != Channel.HEARTBEAT;
        socket.setLinger(sendsRequests ? LINGER_MILLIS : 0);
        socket.setHandshakeIvl(HANDSHAKE_MILLIS);
        socket.setIPv6(connection.isIpv6());
        // A headless client must not lose output: it takes all the kernel sends and keeps it in its own memory.
        socket.setHWM(0);
        if (channel == Channel.IOPUB) {
            socket.subscribe(new byte[0]);
        } else {
            // The kernel's questions on stdin go to the identity that its shell request came from.
            socket.setIdentity(session.getBytes(StandardCharsets.US_ASCII));
        }
        socket.connect(connection.address(channel));
        return socket;
    }

    private void receive(Channel channel, List<byte[]> frames, Deliveries deliveries) {
        if (channel == Channel.HEARTBEAT) {
            String token = new String(frames.get(frames.size() - 1), StandardCharsets.US_ASCII);
            Optional.ofNullable(beats.get(token)).ifPresent(echo -> echo.complete(null));
            return;
        }
        Envelope envelope;
        try {
            envelope = codec.decode(frames);
        } catch (MalformedMessageException e) {
            LOG.log(
                    Level.WARNING,
                    () -> "Ignored a message on " + channel.protocolName() + ": " + e.getMessage() + ".");
            return;
        }
        if (channel == Channel.IOPUB && envelope.message().type().equals("iopub_welcome")) {
            subscribed.complete(null);
        }
        deliveries.deliver(channel, envelope);
    }
}
