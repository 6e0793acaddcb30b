package countwright.kernel.wire;

import java.io.IOException;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.net.StandardSocketOptions;
import java.nio.ByteBuffer;
import java.nio.channels.ClosedSelectorException;
import java.nio.channels.SelectionKey;
import java.nio.channels.Selector;
import java.nio.channels.ServerSocketChannel;
import java.nio.channels.SocketChannel;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Optional;
import java.util.Queue;
import java.util.Set;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicBoolean;

/**
 * Owns one of the kernel's sockets and all its peers: the only thread that touches them.
 *
 * <p>What others want done is put into a queue, and the selector is woken. A peer costs little before it has shown that
 * it holds the key: it must introduce itself soon, and what it and its like may leave unfinished is limited. What goes
 * wrong with one peer ends that peer's connection, never this loop.
 */
final class PeerLoop implements Peer.Host {

    private static final Logger LOG = System.getLogger(PeerLoop.class.getName());
    private static final int MOST_PEERS = 400;
    private static final long HANDSHAKE_NANOS = TimeUnit.SECONDS.toNanos(10);
    private static final long STALL_NANOS = TimeUnit.SECONDS.toNanos(5);
    private static final long LINGER_NANOS = TimeUnit.MILLISECONDS.toNanos(500);
    private static final long UPKEEP_MILLIS = 250;
    private static final int READ_BYTES = 64 << 10;
    private static final int WRITE_BYTES = 256 << 10;

    /** What one peer without the key may leave unfinished, and what all of them together. */
    private static final long UNPROVEN_BYTES = 16 << 20;

    private static final long ALL_UNPROVEN_BYTES = 32 << 20;

    /** A peer this far behind that takes nothing any more is let go; at the higher mark in any case. */
    static final long BEHIND_BYTES = 4 << 20;

    private static final long FAR_BEHIND_BYTES = 64 << 20;

    private final String name;
    private final WireLimits limits;
    private final Traffic traffic;
    private final Complaints complaints;
    private final ServerSocketChannel server;
    private final Selector selector;
    private final Thread thread;
    private final List<Peer> peers = new ArrayList<>();
    private final Queue<Runnable> tasks = new ConcurrentLinkedQueue<>();
    private final Queue<Runnable> whenAllIsRead = new ConcurrentLinkedQueue<>();
    private final AtomicBoolean awake = new AtomicBoolean();
    private final ByteBuffer readBuffer = ByteBuffer.allocateDirect(READ_BYTES);
    private final ByteBuffer writeBuffer = ByteBuffer.allocateDirect(WRITE_BYTES);
    private volatile boolean closing;

    /** Takes over a socket that listens; call {@link #start} next. */
    PeerLoop(String name, ServerSocketChannel server, WireLimits limits, Traffic traffic, Complaints complaints)
            throws IOException {
        this.name = name;
        this.server = server;
        this.limits = limits;
        this.traffic = traffic;
        this.complaints = complaints;
        this.selector = Selector.open();
        server.configureBlocking(false);
        server.register(selector, SelectionKey.OP_ACCEPT);
        this.thread = new Thread(this::run, "countwright-" + name);
        thread.setDaemon(true);
    }

    void start() {
        thread.start();
    }

    /** Runs an action soon on the loop's thread. */
    void execute(Runnable action) {
        tasks.add(action);
        wake();
    }

    /** Runs an action once everything that has arrived by then has been handed on. */
    void whenAllIsRead(Runnable action) {
        whenAllIsRead.add(action);
        wake();
    }

    /** Does what is queued and writes it out, for half a second at most, then closes everything. Returns at once. */
    void close() {
        closing = true;
        if (thread.getState() == Thread.State.NEW) {
            closeAll();
        } else {
            wake();
        }
    }

    void join() throws InterruptedException {
        thread.join();
    }

    /** Returns all peers as they are now; on the loop's thread. */
    List<Peer> peers() {
        return List.copyOf(peers);
    }

    /** Queues a message for a peer and writes what can be written at once. */
    void send(Peer peer, List<byte[]> pieces) {
        if (peer.isClosed()) {
            return;
        }
        // Before the message is queued: one that is large by itself puts nobody behind.
        if (peer.queuedBytes() > FAR_BEHIND_BYTES) {
            disconnect(peer, "it is " + (FAR_BEHIND_BYTES >> 20) + " MB behind in reading");
        } else {
            peer.queue(pieces);
            flushIfRoom(peer);
        }
    }

    private void wake() {
        if (awake.compareAndSet(false, true)) {
            try {
                selector.wakeup();
            } catch (ClosedSelectorException e) {
                LOG.log(Level.DEBUG, () -> "The " + name + " socket is already closed.");
            }
        }
    }

    private void run() {
        long upkeepDue = System.nanoTime();
        while (!closing) {
            try {
                selector.select(UPKEEP_MILLIS);
                awake.set(false);
                runAll(tasks);
                boolean quiet = selector.selectedKeys().isEmpty();
                serveSelected();
                traffic.turnEnded(peers);
                if (!whenAllIsRead.isEmpty()) {
                    runWhenQuiet(quiet);
                }
                if (System.nanoTime() - upkeepDue >= 0) {
                    upkeep();
                    traffic.turnEnded(peers);
                    upkeepDue = System.nanoTime() + TimeUnit.MILLISECONDS.toNanos(UPKEEP_MILLIS);
                }
            } catch (IOException | RuntimeException | Error e) {
                complain("The ", " socket met an error and goes on: ", e);
            }
        }
        try {
            runAll(tasks);
            linger();
        } catch (IOException | RuntimeException | Error e) {
            LOG.log(Level.DEBUG, "The " + name + " socket could not send all before it was closed.", e);
        } finally {
            closeAll();
        }
    }

    private void runWhenQuiet(boolean quiet) throws IOException {
        // A key not selected just now may have become readable since the action was queued.
        if (quiet && selector.selectNow() == 0) {
            runAll(whenAllIsRead);
        } else {
            serveSelected();
        }
        // The look just now may have used up the wakeup of a task that has come meanwhile.
        selector.wakeup();
    }

    private void runAll(Queue<Runnable> queue) {
        for (Runnable next = queue.poll(); next != null; next = queue.poll()) {
            try {
                next.run();
            } catch (RuntimeException | Error e) {
                LOG.log(Level.ERROR, "Something on " + name + " could not be done; the next will be.", e);
            }
        }
    }

    private void serveSelected() {
        Set<SelectionKey> selected = selector.selectedKeys();
        for (SelectionKey key : List.copyOf(selected)) {
            if (key.attachment() instanceof Peer peer) {
                serve(peer, key);
            } else {
                accept(key);
            }
        }
        selected.clear();
    }

    private void serve(Peer peer, SelectionKey key) {
        try {
            if (key.isValid() && key.isWritable()) {
                flush(peer);
            }
            if (key.isValid() && key.isReadable()) {
                if (!peer.read(readBuffer)) {
                    remove(peer);
                    return;
                }
                peer.feed(readBuffer);
                checkHeld(peer);
                flushIfRoom(peer);
            }
        } catch (WireViolation e) {
            disconnect(peer, String.valueOf(e.getMessage()));
        } catch (IOException e) {
            LOG.log(Level.DEBUG, () -> "A peer on " + name + " is gone: " + e);
            remove(peer);
        } catch (RuntimeException | Error e) {
            // Memory running short included: the socket must outlive whatever one peer does.
            remove(peer);
            complain("A message on ", " could not be taken; its sender is disconnected: ", e);
        }
    }

    private void accept(SelectionKey key) {
        try {
            for (SocketChannel channel = server.accept(); channel != null; channel = server.accept()) {
                welcome(channel);
            }
        } catch (IOException | RuntimeException | Error e) {
            // Out of file descriptors, as a rule: the connection waits, and is tried again at the next upkeep.
            complaints.tell("No connection could be taken on " + name + ": " + e);
            key.interestOps(0);
        }
    }

    private void welcome(SocketChannel channel) throws IOException {
        if (peers.size() >= MOST_PEERS) {
            idlest().ifPresent(peer -> disconnect(peer, "others wait for its place"));
        }
        if (peers.size() >= MOST_PEERS) {
            channel.close();
            complaints.tell("Refused a connection on " + name + ": " + MOST_PEERS + " are open.");
            return;
        }
        try {
            channel.configureBlocking(false);
            if (channel.supportedOptions().contains(StandardSocketOptions.TCP_NODELAY)) {
                channel.setOption(StandardSocketOptions.TCP_NODELAY, true);
            }
            if (channel.supportedOptions().contains(StandardSocketOptions.SO_KEEPALIVE)) {
                // A peer whose machine is gone must not keep its place for ever.
                channel.setOption(StandardSocketOptions.SO_KEEPALIVE, true);
            }
            SelectionKey key = channel.register(selector, SelectionKey.OP_READ);
            Peer peer = new Peer(channel, key, traffic.socketType(), limits, this);
            key.attach(peer);
            peers.add(peer);
            peer.queue(List.of(Zmtp.greeting()));
            flush(peer);
        } catch (IOException | RuntimeException | Error e) {
            channel.close();
            throw e;
        }
    }

    /** Writes, but not to a peer that the selector watches: each try would gather the backlog in vain. */
    private void flushIfRoom(Peer peer) {
        if (!peer.isAwaitingRoom()) {
            flush(peer);
        }
    }

    private void flush(Peer peer) {
        if (peer.isClosed()) {
            return;
        }
        try {
            peer.flush(writeBuffer);
        } catch (IOException e) {
            // It may have closed right after a request, which is still to be read.
            LOG.log(Level.DEBUG, () -> "A peer on " + name + " takes nothing any more: " + e);
            peer.setDeaf();
        }
    }

    private void checkHeld(Peer peer) throws WireViolation {
        if (peer.isAuthentic() || peer.heldBytes() < READ_BYTES) {
            return;
        }
        long all = peers.stream()
                .filter(other -> !other.isAuthentic())
                .mapToLong(Peer::heldBytes)
                .sum();
        if (peer.heldBytes() > UNPROVEN_BYTES || all > ALL_UNPROVEN_BYTES) {
            throw new WireViolation("it sends much before it has shown that it holds the key");
        }
    }

    private void upkeep() {
        long now = System.nanoTime();
        for (SelectionKey key : selector.keys()) {
            if (key.isValid() && key.interestOps() == 0) {
                key.interestOps(SelectionKey.OP_ACCEPT);
            }
        }
        for (Peer peer : List.copyOf(peers)) {
            if (!peer.hasJoined() && now - peer.since() > HANDSHAKE_NANOS) {
                disconnect(peer, "it did not introduce itself in time");
            } else if (peer.queuedBytes() > BEHIND_BYTES && now - peer.lastProgress() > STALL_NANOS) {
                disconnect(peer, "it has stopped reading");
            }
        }
    }

    /** Returns the peer with the least claim to its place: it has neither shown the key nor subscribed, and is the oldest. */
    private Optional<Peer> idlest() {
        long now = System.nanoTime();
        return peers.stream()
                .filter(peer -> !peer.isAuthentic() && peer.subscriptions().isEmpty())
                .filter(peer -> now - peer.since() > HANDSHAKE_NANOS)
                .max(Comparator.comparingLong(peer -> now - peer.since()));
    }

    /** Memory may be what is short: then not even this may end the thread. */
    private void complain(String before, String after, Throwable cause) {
        try {
            complaints.tell(before + name + after + cause);
        } catch (RuntimeException | Error unsaid) {
            return;
        }
    }

    private void disconnect(Peer peer, String reason) {
        if (!peer.isClosed()) {
            remove(peer);
            complaints.tell("Disconnected a peer on " + name + ": " + reason + ".");
        }
    }

    private void remove(Peer peer) {
        if (!peer.isClosed()) {
            peer.close();
            peers.remove(peer);
            traffic.left(peer);
        }
    }

    private void linger() throws IOException {
        long end = System.nanoTime() + LINGER_NANOS;
        while (peers.stream().anyMatch(peer -> peer.queuedBytes() > 0) && end - System.nanoTime() > 0) {
            selector.select(20);
            for (SelectionKey key : List.copyOf(selector.selectedKeys())) {
                if (key.attachment() instanceof Peer peer && key.isValid() && key.isWritable()) {
                    flush(peer);
                }
            }
            selector.selectedKeys().clear();
        }
        for (Peer peer : List.copyOf(peers)) {
            finish(peer);
        }
    }

    private void finish(Peer peer) {
        try {
            peer.finish(readBuffer);
        } catch (IOException e) {
            LOG.log(Level.DEBUG, () -> "A peer on " + name + " went first: " + e);
        }
    }

    private void closeAll() {
        List.copyOf(peers).forEach(this::remove);
        try {
            server.close();
            selector.close();
        } catch (IOException e) {
            LOG.log(Level.DEBUG, "The " + name + " socket could not be closed.", e);
        }
    }

    @Override
    public void joined(Peer peer) throws WireViolation {
        traffic.joined(peer);
    }

    @Override
    public void received(Peer peer, List<byte[]> frames) throws WireViolation {
        traffic.received(peer, frames);
    }

    @Override
    public void skipped(String reason) {
        complaints.tell("Ignored a message on " + name + ": " + reason + ".");
    }
}
