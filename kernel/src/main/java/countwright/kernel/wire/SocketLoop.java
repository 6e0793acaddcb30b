package countwright.kernel.wire;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.nio.ByteBuffer;
import java.nio.channels.Pipe;
import java.util.ArrayList;
import java.util.List;
import java.util.Queue;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.function.Consumer;
import org.zeromq.ZMQ;
import org.zeromq.ZMQException;

/**
 * Owns one of a front end's sockets: the only thread that touches it.
 *
 * <p>A ZeroMQ socket belongs to one thread, while messages to send come from many. They are put into a queue, and a byte
 * in a pipe wakes the owner, which waits on socket and pipe at once; so nothing is polled for and a message leaves some
 * tens of microseconds after it was queued. One byte serves any number of queued messages: {@code awake} tells whether
 * one is already under way. The owner clears it before it looks at the queue, hence no message is overlooked.
 *
 * <p>Between two waits everything readable is read, but what is queued for sending gets its turn after each message, so
 * neither side starves the other. What a receiver throws is logged and ends that message only.
 */
final class SocketLoop {

    private static final Logger LOG = System.getLogger(SocketLoop.class.getName());

    private final String name;
    private final ZMQ.Socket socket;
    private final ZMQ.Poller poller;
    private final WireLimits limits;
    private final Consumer<List<byte[]>> receiver;
    private final Pipe pipe;
    private final Thread thread;
    private final Queue<List<byte[]>> outgoing = new ConcurrentLinkedQueue<>();
    private final AtomicBoolean awake = new AtomicBoolean();
    private volatile boolean closing;

    /** Takes over a socket that is bound or connected; call {@link #start} next. */
    SocketLoop(
            String name, ZMQ.Context context, ZMQ.Socket socket, WireLimits limits, Consumer<List<byte[]>> receiver) {
        this.name = name;
        this.socket = socket;
        this.limits = limits;
        this.receiver = receiver;
        this.poller = context.poller(2);
        this.thread = new Thread(this::run, "countwright-" + name);
        thread.setDaemon(true);
        try {
            this.pipe = Pipe.open();
            pipe.source().configureBlocking(false);
            pipe.sink().configureBlocking(false);
        } catch (IOException e) {
            throw new UncheckedIOException("No pipe could be opened to wake the " + name + " socket.", e);
        }
    }

    void start() {
        thread.start();
    }

    void send(List<byte[]> frames) {
        outgoing.add(frames);
        wake();
    }

    /** Sends what is queued, then closes the socket. Returns at once, unless the loop was never started. */
    void close() {
        closing = true;
        if (thread.getState() == Thread.State.NEW) {
            run();
        } else {
            wake();
        }
    }

    /** Waits until the socket is closed. */
    void join() throws InterruptedException {
        thread.join();
    }

    /** An interrupted thread that writes to a pipe would close it for good, so the interrupt is put aside meanwhile. */
    private void wake() {
        if (!awake.compareAndSet(false, true)) {
            return;
        }
        boolean interrupted = Thread.interrupted();
        try {
            pipe.sink().write(ByteBuffer.wrap(new byte[1]));
        } catch (IOException e) {
            LOG.log(Level.DEBUG, () -> "The " + name + " socket is already closed.");
        } finally {
            if (interrupted) {
                Thread.currentThread().interrupt();
            }
        }
    }

    private void run() {
        poller.register(socket, ZMQ.Poller.POLLIN);
        int wakeups = poller.register(pipe.source(), ZMQ.Poller.POLLIN);
        ByteBuffer sink = ByteBuffer.allocate(16);
        try {
            while (!closing) {
                sendQueued();
                boolean receivedOne = receiveOne();
                if (!receivedOne) {
                    poller.poll(-1);
                    if (poller.pollin(wakeups)) {
                        sink.clear();
                        pipe.source().read(sink);
                        awake.set(false);
                    }
                }
            }
            sendQueued();
        } catch (ZMQException | IOException e) {
            LOG.log(Level.ERROR, "The " + name + " socket failed and is closed.", e);
        } finally {
            poller.close();
            socket.close();
            closePipe();
        }
    }

    private void closePipe() {
        try {
            pipe.sink().close();
            pipe.source().close();
        } catch (IOException e) {
            LOG.log(Level.DEBUG, "The pipe of the " + name + " socket could not be closed.", e);
        }
    }

    private void sendQueued() {
        for (List<byte[]> next = outgoing.poll(); next != null; next = outgoing.poll()) {
            sendNow(next);
        }
    }

    private void sendNow(List<byte[]> frames) {
        try {
            for (int i = 0; i < frames.size(); i++) {
                if (!socket.send(frames.get(i), i + 1 < frames.size() ? ZMQ.SNDMORE : 0)) {
                    return;
                }
            }
        } catch (ZMQException e) {
            if (e.getErrorCode() == ZMQ.Error.ETERM.getCode()) {
                throw e;
            }
            LOG.log(Level.DEBUG, () -> "A message on " + name + " could not be sent (" + e.getErrorCode() + ").");
        }
    }

    /** The socket must outlive whatever goes wrong with one message, memory running short for it included. */
    private void runSafely(Runnable action) {
        try {
            action.run();
        } catch (RuntimeException | Error e) {
            LOG.log(Level.ERROR, "A message on " + name + " could not be handled; the next one will be.", e);
        }
    }

    private boolean receiveOne() {
        byte[] first = socket.recv(ZMQ.DONTWAIT);
        if (first == null) {
            return false;
        }
        List<byte[]> frames = new ArrayList<>();
        frames.add(first);
        int count = 1;
        long bytes = first.length;
        while (socket.hasReceiveMore()) {
            byte[] frame = socket.recv(0);
            count++;
            bytes += frame.length;
            if (count <= limits.frames() && bytes <= limits.messageBytes()) {
                frames.add(frame);
            } else {
                frames.clear();
            }
        }
        if (frames.size() < count) {
            int dropped = count;
            LOG.log(Level.WARNING, () -> "Ignored a message on " + name + ": " + dropped + " frames are too many.");
        } else {
            runSafely(() -> receiver.accept(frames));
        }
        return true;
    }
}
