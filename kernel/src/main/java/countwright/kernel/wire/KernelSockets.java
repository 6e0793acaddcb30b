package countwright.kernel.wire;

import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.nio.charset.StandardCharsets;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.UUID;
import org.zeromq.SocketType;
import org.zeromq.ZMQ;
import org.zeromq.ZMQException;
import tools.jackson.databind.node.JsonNodeFactory;

/**
 * The kernel's five sockets. Each has a thread of its own, so a large message on one does not hold up another, and the
 * heartbeat answers whatever else goes on. Everything here may be called by any thread and returns at once.
 *
 * <p>Anything that is not a well-formed, correctly signed, first-time message is ignored, with a line in the log that
 * says why and quotes nothing.
 *
 * <p>iopub is an XPUB socket: each subscription is answered by {@code iopub_welcome}, so that a front end knows when it
 * will miss nothing. Its queue for a front end that reads slowly is long but bounded; one that stops reading loses
 * messages rather than filling the kernel's memory.
 */
public final class KernelSockets implements AutoCloseable {

    private static final Logger LOG = System.getLogger(KernelSockets.class.getName());
    private static final int IOPUB_QUEUE = 100_000;
    private static final int LINGER_MILLIS = 1000;
    private static final int LONGEST_TOPIC = 1024;

    private final ZMQ.Context context = ZMQ.context(1);
    private final SocketLoops loops = new SocketLoops();
    private final MessageCodec codec;
    private final WireLimits limits;
    private volatile Deliveries receiver = (channel, envelope) -> {};
    private final String session = UUID.randomUUID().toString();

    private KernelSockets(ConnectionFile connection, WireLimits limits) {
        this.codec = new MessageCodec(connection.key(), limits);
        this.limits = limits;
    }

    /**
     * Binds all sockets; heartbeats and subscriptions are answered from now on, requests wait for {@link #start}.
     *
     * @throws IllegalStateException if an address is taken or not of this machine; nothing stays bound then
     */
    public static KernelSockets bind(ConnectionFile connection, WireLimits limits) {
        KernelSockets sockets = new KernelSockets(connection, limits);
        Map<Channel, ZMQ.Socket> bound = new EnumMap<>(Channel.class);
        List<byte[]> starting = sockets.starting();
        try {
            for (Channel channel : Channel.values()) {
                ZMQ.Socket socket = sockets.bound(channel, connection);
                bound.put(channel, socket);
                if (channel == Channel.IOPUB) {
                    // In the same breath: a moment later there may be a subscriber, who is to hear the welcome first.
                    sayNow(socket, starting);
                }
            }
        } catch (IllegalStateException e) {
            bound.values().forEach(ZMQ.Socket::close);
            sockets.context.close();
            throw e;
        }
        if (connection.key().isEmpty()) {
            LOG.log(Level.WARNING, "The key is empty: anyone who reaches the ports of this kernel can run code in it.");
        }
        bound.forEach((channel, socket) -> sockets.loops.add(channel, sockets.newLoop(channel, socket)));
        sockets.loops.on(Channel.HEARTBEAT).start();
        sockets.loops.on(Channel.IOPUB).start();
        return sockets;
    }

    /** Starts to deliver what comes in on shell, control and stdin. To be called once. */
    public void start(Deliveries deliveries) {
        receiver = deliveries;
        loops.on(Channel.STDIN).start();
        loops.on(Channel.CONTROL).start();
        loops.on(Channel.SHELL).start();
    }

    /** Returns the session id that this kernel's messages carry. */
    public String session() {
        return session;
    }

    /** Sends a message. */
    public void send(Channel channel, Envelope envelope) {
        loops.on(channel).send(codec.encode(envelope));
    }

    /** Asks a front end a question on stdin; runs the action if no such front end listens there. */
    public void ask(Envelope question, Runnable undeliverable) {
        loops.on(Channel.STDIN).send(codec.encode(question), undeliverable);
    }

    /** Runs a short action once every message that has arrived on a channel by now has been delivered. */
    public void whenAllIsDelivered(Channel channel, Runnable action) {
        loops.on(channel).whenAllIsRead(action);
    }

    /** Sends what is still queued, waiting a second at most for slow front ends, and closes all sockets. */
    @Override
    public void close() {
        loops.close(context);
    }

    /** What the protocol has a kernel say once, when it is up; it has no cause but itself. */
    private List<byte[]> starting() {
        Message status = Message.first(
                Header.create("status", session, "kernel"),
                JsonNodeFactory.instance.objectNode().put("execution_state", "starting"));
        return codec.encode(new Envelope(Route.topic("status"), status));
    }

    private static void sayNow(ZMQ.Socket socket, List<byte[]> frames) {
        for (int i = 0; i < frames.size(); i++) {
            socket.send(frames.get(i), i + 1 < frames.size() ? ZMQ.SNDMORE : 0);
        }
    }

    private ZMQ.Socket bound(Channel channel, ConnectionFile connection) {
        ZMQ.Socket socket = context.socket(channel == Channel.IOPUB ? SocketType.XPUB : SocketType.ROUTER);
        socket.setLinger(LINGER_MILLIS);
        socket.setMaxMsgSize(limits.frameBytes());
        socket.setIPv6(connection.isIpv6());
        if (channel == Channel.IOPUB) {
            socket.setXpubVerbose(true);
            socket.setSndHWM(IOPUB_QUEUE);
        } else {
            // A front end that reconnects under its old identity takes it over, instead of being refused.
            socket.setRouterHandover(true);
        }
        if (channel == Channel.STDIN) {
            socket.setRouterMandatory(true);
        }
        String address = connection.address(channel);
        try {
            if (socket.bind(address)) {
                return socket;
            }
        } catch (ZMQException | IllegalArgumentException e) {
            LOG.log(Level.DEBUG, "bind failed", e);
        }
        socket.close();
        throw new IllegalStateException("The kernel cannot listen on " + address + " (" + channel.protocolName()
                + "): the port is taken or the address is not of this machine."
                + " Let the front end start the kernel again with other ports.");
    }

    private SocketLoop newLoop(Channel channel, ZMQ.Socket socket) {
        return new SocketLoop(channel.protocolName(), context, socket, limits, frames -> {
            switch (channel) {
                case HEARTBEAT -> loops.on(Channel.HEARTBEAT).send(frames);
                case IOPUB -> welcome(frames.get(0));
                case SHELL, CONTROL, STDIN -> receive(channel, frames);
            }
        });
    }

    private void receive(Channel channel, List<byte[]> frames) {
        Envelope envelope;
        try {
            envelope = codec.decode(frames);
        } catch (MalformedMessageException e) {
            LOG.log(
                    Level.WARNING,
                    () -> "Ignored a message on " + channel.protocolName() + ": " + e.getMessage() + ".");
            return;
        }
        receiver.deliver(channel, envelope);
    }

    /** A subscription comes as one frame: 1 for on or 0 for off, then the topic. */
    private void welcome(byte[] subscription) {
        if (subscription.length == 0 || subscription[0] != 1 || subscription.length > LONGEST_TOPIC) {
            return;
        }
        String topic = new String(subscription, 1, subscription.length - 1, StandardCharsets.UTF_8);
        Message welcome = Message.first(
                Header.create("iopub_welcome", session, "kernel"),
                JsonNodeFactory.instance.objectNode().put("subscription", topic));
        send(Channel.IOPUB, new Envelope(Route.topic(topic), welcome));
    }
}
