package countwright.kernel.service;

import countwright.kernel.cell.CellEngine;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.KernelSockets;
import countwright.kernel.wire.WireLimits;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.time.Duration;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.function.Supplier;
import tools.jackson.databind.node.ObjectNode;

/**
 * A kernel that listens. It answers as soon as it is started; the engine comes up behind it, and cells wait for it.
 *
 * <pre>{@code
 * KernelServer server = KernelServer.start(ConnectionFile.read(path), () -> openEngine());
 * server.awaitShutdown();
 * System.exit(0);
 * }</pre>
 */
public final class KernelServer implements AutoCloseable {

    private static final Logger LOG = System.getLogger(KernelServer.class.getName());
    private static final Duration WORKER_PATIENCE = Duration.ofSeconds(2);

    private final KernelSockets sockets;
    private final Outbox outbox;
    private final EngineGate engine;
    private final InputDesk inputDesk;
    private final CellLane cells;
    private final ExecutorService questions;
    private final CompletableFuture<Ending> ending = new CompletableFuture<>();
    private final AtomicBoolean closed = new AtomicBoolean();

    /** Why a kernel ended. */
    public enum Ending {
        /** The front end asked it to stop. */
        STOP,
        /** The front end asked it to stop and will start another in its place. */
        RESTART,
        /** It was closed from within. */
        CLOSED
    }

    private KernelServer(KernelSockets sockets, Supplier<? extends CellEngine> engineStart) {
        this.sockets = sockets;
        this.engine = new EngineGate(engineStart);
        this.outbox = new Outbox(sockets);
        this.inputDesk = new InputDesk(outbox);
        History history = new History();
        this.cells =
                new CellLane(sockets, outbox, new SafeAnswer(new ExecuteHandler(engine, outbox, inputDesk, history)));
        this.questions = Executors.newSingleThreadExecutor(task -> {
            Thread thread = new Thread(task, "countwright-questions");
            thread.setDaemon(true);
            return thread;
        });
        QuestionHandlers about = new QuestionHandlers(engine);
        CommHandlers comms = new CommHandlers(outbox);
        Dispatcher dispatcher = new Dispatcher(outbox, inputDesk, cells)
                .atOnce("kernel_info_request", new KernelInfo())
                .atOnce("history_request", history)
                .atOnce("comm_info_request", comms.info())
                .atOnce("comm_open", comms.open())
                .atOnce("comm_msg", comms.ignore())
                .atOnce("comm_close", comms.ignore())
                .atOnce("interrupt_request", request -> interrupt())
                .atOnce("shutdown_request", request -> shutdown(request, outbox), this::end)
                .through(questions, "is_complete_request", about.isComplete())
                .through(questions, "complete_request", about.complete())
                .through(questions, "inspect_request", about.inspect());
        outbox.starting();
        cells.start();
        sockets.start(dispatcher);
    }

    /**
     * Starts to listen.
     *
     * @param engineStart opens the engine; called once, on a thread of its own. What it throws is what cells then fail with
     * @throws IllegalStateException if a port of the connection is taken
     */
    public static KernelServer start(ConnectionFile connection, Supplier<? extends CellEngine> engineStart) {
        return new KernelServer(KernelSockets.bind(connection, WireLimits.STANDARD), engineStart);
    }

    /**
     * Waits until a front end has asked for the end and has been answered, then ends the engine and closes the sockets.
     * The caller ends the process.
     */
    public Ending awaitShutdown() throws InterruptedException {
        try {
            Ending reason = ending.get();
            close();
            return reason;
        } catch (ExecutionException e) {
            throw new IllegalStateException("nothing completes the ending with a failure", e);
        }
    }

    /** Ends the engine, aborts what waits, sends what is queued and closes the sockets; takes a few seconds at most. */
    @Override
    public void close() {
        if (!closed.compareAndSet(false, true)) {
            return;
        }
        ending.complete(Ending.CLOSED);
        outbox.hurry();
        inputDesk.cancel("The kernel is shutting down.");
        questions.shutdown();
        try {
            engine.interrupt();
            engine.close(WORKER_PATIENCE);
            cells.close(WORKER_PATIENCE);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        } finally {
            questions.shutdownNow();
            sockets.close();
        }
    }

    private Optional<ObjectNode> interrupt() {
        outbox.hurry();
        // The engine first: a cell that asked should end as interrupted, not with the refused question.
        engine.interrupt();
        inputDesk.cancel("The cell was interrupted before the question was answered.");
        return Optional.of(Replies.ok());
    }

    /** The reply is also published, so that other front ends learn of the end. */
    private static Optional<ObjectNode> shutdown(Request request, Outbox outbox) {
        var reply = Replies.ok().put("restart", request.content().flag("restart", false));
        outbox.publish("shutdown_reply", request.header(), reply);
        return Optional.of(reply);
    }

    /** A request that was refused as wrong ends nothing. */
    private void end(Request request) {
        try {
            ending.complete(request.content().flag("restart", false) ? Ending.RESTART : Ending.STOP);
        } catch (BadRequestException e) {
            LOG.log(Level.DEBUG, "A shutdown_request was refused.");
        }
    }
}
