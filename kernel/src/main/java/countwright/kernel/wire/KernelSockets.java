package countwright.kernel.wire;

import java.io.IOException;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.UUID;
import tools.jackson.databind.node.JsonNodeFactory;

/**
 * The kernel's five sockets. Each has a thread of its own, so a large message on one does not hold up another, and the
 * heartbeat answers whatever else goes on. Everything here may be called by any thread; only {@link #sendWhenRoom} and
 * {@link #close} take their time.
 *
 * <p>Anything that is not a well-formed, correctly signed, first-time message is ignored, with a line in the log that
 * says why and quotes nothing.
 *
 * <p>Each subscription to iopub is answered by {@code iopub_welcome}, so that a front end knows when it will miss nothing.
 * A front end that reads loses nothing: output waits for it. One that has stopped reading is disconnected when megabytes
 * wait for it; it may connect again, and the new welcome tells it that there is a gap.
 */
public final class KernelSockets implements AutoCloseable {

    private static final Logger LOG = System.getLogger(KernelSockets.class.getName());

    private final Map<Channel, PeerLoop> loops = new EnumMap<>(Channel.class);
    private final Map<Channel, Listener> listeners = new EnumMap<>(Channel.class);
    private final Map<Channel, RequestTraffic> requests = new EnumMap<>(Channel.class);
    private final OutputRoom room = new OutputRoom();
    private final Complaints complaints = new Complaints();
    private final MessageLog messageLog = MessageLog.ofEnvironment();
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
        for (Channel channel : Channel.values()) {
            try {
                Listener listener = Listener.open(connection, channel);
                sockets.listeners.put(channel, listener);
                sockets.loops.put(channel, sockets.newLoop(channel, listener));
            } catch (IOException e) {
                sockets.loops.values().forEach(PeerLoop::close);
                sockets.listeners.values().forEach(Listener::close);
                throw new IllegalStateException(
                        "The kernel cannot listen on " + connection.address(channel) + " (" + channel.protocolName()
                                + "): " + e.getMessage()
                                + ". Let the front end start the kernel again with other ports.",
                        e);
            }
        }
        if (connection.key().isEmpty()) {
            LOG.log(Level.WARNING, "The key is empty: anyone who reaches the ports of this kernel can run code in it.");
        }
        // Queued before the first subscriber can come, who is to hear the welcome first.
        sockets.send(Channel.IOPUB, sockets.starting());
        sockets.loop(Channel.HEARTBEAT).start();
        sockets.loop(Channel.IOPUB).start();
        return sockets;
    }

    /** Starts to deliver what comes in on shell, control and stdin. To be called once. */
    public void start(Deliveries deliveries) {
        receiver = deliveries;
        loop(Channel.STDIN).start();
        loop(Channel.CONTROL).start();
        loop(Channel.SHELL).start();
    }

    /** Returns the session id that this kernel's messages carry. */
    public String session() {
        return session;
    }

    /** Sends a message. */
    public void send(Channel channel, Envelope envelope) {
        send(channel, envelope, () -> {});
    }

    /** Sends a message, on iopub once all front ends that read are near enough to it; elsewhere at once. */
    public void sendWhenRoom(Channel channel, Envelope envelope) {
        if (channel == Channel.IOPUB) {
            room.await();
        }
        send(channel, envelope);
    }

    /** Lets output that waits through for a moment, because something urgent stands behind it. */
    public void hurry() {
        room.hurry();
    }

    /** Asks a front end a question on stdin; runs the action if no such front end listens there. */
    public void ask(Envelope question, Runnable undeliverable) {
        send(Channel.STDIN, question, undeliverable);
    }

    /** What the protocol has a kernel say once, when it is up; it has no cause but itself. */
    private Envelope starting() {
        Message status = Message.first(
                Header.create("status", session, "kernel"),
                JsonNodeFactory.instance.objectNode().put("execution_state", "starting"));
        return new Envelope(Route.topic("status"), status);
    }

    private void send(Channel channel, Envelope envelope, Runnable undeliverable) {
        messageLog.sent(channel, envelope.message());
        List<byte[]> frames = codec.encode(envelope);
        PeerLoop loop = loop(channel);
        RequestTraffic traffic = requests.get(channel);
        if (traffic == null) {
            publish(loop, frames);
        } else {
            loop.execute(() -> {
                Optional<Peer> peer = traffic.find(frames.get(0));
                if (peer.isPresent()) {
                    loop.send(peer.get(), Zmtp.message(frames.subList(1, frames.size())));
                } else {
                    undeliverable.run();
                }
            });
        }
    }

    private void publish(PeerLoop loop, List<byte[]> frames) {
        List<byte[]> pieces = Zmtp.message(frames);
        long bytes = pieces.stream().mapToLong(piece -> piece.length).sum();
        room.add(bytes);
        loop.execute(() -> {
            try {
                for (Peer peer : loop.peers()) {
                    if (peer.wants(frames.get(0))) {
                        loop.send(peer, pieces);
                    }
                }
            } finally {
                room.remove(bytes);
            }
        });
    }

    /** Runs a short action once every message that has arrived on a channel by now has been delivered. */
    public void whenAllIsDelivered(Channel channel, Runnable action) {
        loop(channel).whenAllIsRead(action);
    }

    /** Sends what is still queued, waiting half a second at most for slow front ends, and closes all sockets. */
    @Override
    public void close() {
        room.open();
        loops.values().forEach(PeerLoop::close);
        try {
            for (PeerLoop loop : loops.values()) {
                loop.join();
            }
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        } finally {
            listeners.values().forEach(Listener::close);
        }
    }

    private PeerLoop loop(Channel channel) {
        return Optional.ofNullable(loops.get(channel)).orElseThrow();
    }

    private PeerLoop newLoop(Channel channel, Listener listener) throws IOException {
        Traffic traffic = switch (channel) {
            case HEARTBEAT -> new EchoTraffic((peer, frames) -> loop(channel).send(peer, Zmtp.message(frames)));
            case IOPUB -> new PublishTraffic(room, this::welcome);
            case SHELL, CONTROL, STDIN -> new RequestTraffic(frames -> receive(channel, frames));
        };
        if (traffic instanceof RequestTraffic routed) {
            requests.put(channel, routed);
        }
        // Nothing large is ever sent to the kernel on the other two.
        WireLimits narrowed = traffic instanceof RequestTraffic ? limits : limits.narrowed();
        return new PeerLoop(channel.protocolName(), listener.channel(), narrowed, traffic, complaints);
    }

    /** Returns whether the frames were a message that shows that its sender holds the key. */
    private boolean receive(Channel channel, List<byte[]> frames) {
        Envelope envelope;
        try {
            envelope = codec.decode(frames);
        } catch (MalformedMessageException e) {
            complaints.tell("Ignored a message on " + channel.protocolName() + ": " + e.getMessage() + ".");
            return false;
        }
        if (envelope.message().header().session().equals(session)) {
            // Whoever listens on iopub gets messages that bear the signature; sent back, they are no requests.
            complaints.tell("Ignored a message on " + channel.protocolName() + ": it is one of this kernel's own.");
            return false;
        }
        messageLog.received(channel, envelope.message());
        try {
            receiver.deliver(channel, envelope);
        } catch (RuntimeException | Error e) {
            // The socket must outlive whatever goes wrong with one message, memory running short for it included.
            LOG.log(
                    Level.ERROR,
                    "A message on " + channel.protocolName() + " could not be handled; the next one will be.",
                    e);
        }
        return true;
    }

    private void welcome(Peer peer, String topic) {
        Message welcome = Message.first(
                Header.create("iopub_welcome", session, "kernel"),
                JsonNodeFactory.instance.objectNode().put("subscription", topic));
        List<byte[]> frames = codec.encode(new Envelope(Route.topic(topic), welcome));
        loop(Channel.IOPUB).send(peer, Zmtp.message(frames));
    }
}
