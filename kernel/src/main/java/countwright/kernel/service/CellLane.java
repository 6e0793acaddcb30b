package countwright.kernel.service;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.KernelSockets;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.time.Duration;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.locks.ReentrantLock;
import tools.jackson.databind.node.ObjectNode;

/**
 * Runs the cells of one shell on one thread, strictly in the order in which they were requested. After a cell that
 * fails, the cells of this lane that were already waiting are aborted, unless the failed request said stop_on_error
 * false: they were sent in the belief that it would succeed.
 *
 * <p>There is one compiler and one thread for user code, so the lanes of all shells share a turn: a cell begins when no
 * other runs, whatever its shell. A cell that waits for its turn can still be aborted.
 */
final class CellLane {

    private static final Logger LOG = System.getLogger(CellLane.class.getName());

    private final KernelSockets sockets;
    private final Outbox outbox;
    private final SafeAnswer execute;
    private final Runnable beginTurn;
    private final ReentrantLock turn;
    private final Thread thread;

    /** What waits; its monitor guards it and the flag below. */
    private final Deque<Request> waiting = new ArrayDeque<>();

    private boolean closed;

    /**
     * Makes a lane.
     *
     * @param beginTurn called before a cell is said to be busy: an interrupt is meant for that cell from then on
     * @param turn held while a cell runs; fair, and shared by all lanes
     */
    CellLane(KernelSockets sockets, Outbox outbox, SafeAnswer execute, Runnable beginTurn, ReentrantLock turn) {
        this.sockets = sockets;
        this.outbox = outbox;
        this.execute = execute;
        this.beginTurn = beginTurn;
        this.turn = turn;
        this.thread = new Thread(this::run, "countwright-cells");
        thread.setDaemon(true);
    }

    void start() {
        thread.start();
    }

    /** Puts a cell in line; in a lane that is closed it is aborted at once. */
    void add(Request request) {
        synchronized (waiting) {
            if (!closed) {
                waiting.addLast(request);
                waiting.notifyAll();
                return;
            }
        }
        abort(request);
    }

    /** Aborts what waits; the cell that runs, if any, runs to its end. */
    void close() {
        synchronized (waiting) {
            closed = true;
            waiting.notifyAll();
        }
        takeWaiting().forEach(this::abort);
    }

    /** Waits, after {@link #close()}, until the running cell has ended, but no longer than given. */
    void awaitEnd(Duration patience) throws InterruptedException {
        thread.join(Math.max(1, patience.toMillis()));
        thread.interrupt();
    }

    private void run() {
        try {
            while (awaitRequest()) {
                turn.lockInterruptibly();
                try {
                    // Taken only now, so that a cell that has not begun can be aborted.
                    Optional<Request> next = takeFirst();
                    if (next.isPresent()) {
                        runSafely(next.get());
                    }
                } finally {
                    turn.unlock();
                }
            }
        } catch (InterruptedException e) {
            // Only the end of the kernel interrupts.
            Thread.currentThread().interrupt();
        }
    }

    private boolean awaitRequest() throws InterruptedException {
        synchronized (waiting) {
            while (waiting.isEmpty() && !closed) {
                waiting.wait();
            }
            return !closed;
        }
    }

    private Optional<Request> takeFirst() {
        synchronized (waiting) {
            return Optional.ofNullable(waiting.pollFirst());
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
        beginTurn.run();
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
            // Whatever went wrong: those that sent them wait.
            aborted.forEach(this::abort);
        }
    }

    private static boolean stopsOnError(Request request) {
        try {
            return request.content().flag("stop_on_error", true);
        } catch (BadRequestException e) {
            return true;
        }
    }

    /** Takes what waits, including what has reached the socket but not yet this lane. */
    private List<Request> takeAllSent() throws InterruptedException {
        CountDownLatch delivered = new CountDownLatch(1);
        sockets.whenAllIsDelivered(Channel.SHELL, delivered::countDown);
        delivered.await(1, TimeUnit.SECONDS);
        return takeWaiting();
    }

    private List<Request> takeWaiting() {
        synchronized (waiting) {
            List<Request> taken = new ArrayList<>(waiting);
            waiting.clear();
            return taken;
        }
    }

    private void abort(Request request) {
        try {
            outbox.busy(request.header());
            outbox.reply(request, Replies.aborted());
            outbox.idle(request.header());
        } catch (RuntimeException | Error e) {
            LOG.log(Level.ERROR, "An aborted cell could not be answered; the next one will be.", e);
        }
    }
}
