package countwright.kernel.service;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.KernelSockets;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;
import tools.jackson.databind.node.ObjectNode;

/**
 * Runs cells on one thread, strictly in the order in which they were requested. After a cell that fails, the cells that
 * were already waiting are aborted, unless the failed request said stop_on_error false: they were sent in the belief
 * that it would succeed.
 */
final class CellLane {

    private static final Logger LOG = System.getLogger(CellLane.class.getName());

    private final KernelSockets sockets;
    private final Outbox outbox;
    private final SafeAnswer execute;

    /** What waits; an empty element only wakes the thread, to see that the lane is closed. */
    private final BlockingQueue<Optional<Request>> waiting = new LinkedBlockingQueue<>();

    private final Thread thread;
    private volatile boolean closed;

    CellLane(KernelSockets sockets, Outbox outbox, SafeAnswer execute) {
        this.sockets = sockets;
        this.outbox = outbox;
        this.execute = execute;
        this.thread = new Thread(this::run, "countwright-cells");
        thread.setDaemon(true);
    }

    void start() {
        thread.start();
    }

    void add(Request request) {
        waiting.add(Optional.of(request));
    }

    /** Aborts what waits and ends once the running cell has ended, waiting for that no longer than given. */
    void close(Duration patience) throws InterruptedException {
        closed = true;
        takeWaiting().forEach(this::abort);
        waiting.add(Optional.empty());
        thread.join(patience.toMillis());
        thread.interrupt();
    }

    private void run() {
        try {
            while (!closed) {
                Optional<Request> next = waiting.take();
                if (next.isPresent()) {
                    runSafely(next.get());
                }
            }
        } catch (InterruptedException e) {
            // Only close() interrupts.
            Thread.currentThread().interrupt();
        }
    }

    /** This thread must outlive whatever goes wrong with one cell. */
    private void runSafely(Request request) throws InterruptedException {
        try {
            runCell(request);
        } catch (RuntimeException | Error e) {
            LOG.log(Level.ERROR, "A cell could not be run or answered; the next one will be.", e);
        }
    }

    private void runCell(Request request) throws InterruptedException {
        outbox.cellBusy(request.header());
        List<Request> aborted = List.of();
        try {
            ObjectNode reply = execute.answer(request).orElseGet(Replies::ok);
            if (reply.path("status").stringValue("").equals("error") && stopsOnError(request)) {
                // Before the reply goes out: what is sent in answer to it is a new beginning and must not be aborted.
                aborted = takeAllSent();
            }
            outbox.reply(request, reply);
        } finally {
            outbox.cellIdle(request.header());
        }
        aborted.forEach(this::abort);
    }

    private static boolean stopsOnError(Request request) {
        try {
            return request.content().flag("stop_on_error", true);
        } catch (BadRequestException e) {
            return true;
        }
    }

    /** Takes what waits, including what has reached the socket but not yet this queue. */
    private List<Request> takeAllSent() throws InterruptedException {
        CountDownLatch delivered = new CountDownLatch(1);
        sockets.whenAllIsDelivered(Channel.SHELL, delivered::countDown);
        delivered.await(1, TimeUnit.SECONDS);
        return takeWaiting();
    }

    private List<Request> takeWaiting() {
        List<Optional<Request>> taken = new ArrayList<>();
        waiting.drainTo(taken);
        return taken.stream().flatMap(Optional::stream).toList();
    }

    private void abort(Request request) {
        outbox.busy(request.header());
        outbox.reply(request, Replies.aborted());
        outbox.idle(request.header());
    }
}
