package countwright.kernel.service;

import countwright.kernel.cell.CellEngine;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.KernelSockets;
import countwright.kernel.wire.WireLimits;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.nio.file.Path;
import java.time.Duration;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.concurrent.locks.ReentrantLock;
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

    /** Together with what the sockets take to send their last, less than the second in which a kernel is to be gone. */
    private static final Duration WORKER_PATIENCE = Duration.ofMillis(200);

    private static final Duration CELL_PATIENCE = Duration.ofMillis(100);
    private static final Duration HISTORY_PATIENCE = Duration.ofMillis(100);

    private final KernelSockets sockets;
    private final Outbox outbox;
    private final EngineGate engine;
    private final InputDesk inputDesk;
    private final Subshells shells;
    private final CommDesk comms;
    private final History history;
    private final ExecutorService usage = Background.inOrder("countwright-usage");
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

    private KernelServer(
            ConnectionFile connection, Optional<Path> historyFile, Supplier<? extends CellEngine> engineStart) {
        this.sockets = KernelSockets.bind(connection, WireLimits.STANDARD);
        this.engine = new EngineGate(engineStart);
        this.outbox = new Outbox(sockets);
        this.inputDesk = new InputDesk(outbox);
        this.history = new History(historyFile);
        this.comms = new CommDesk(engine, outbox);
        SafeAnswer execute = new SafeAnswer(new ExecuteHandler(engine, outbox, inputDesk, comms, history));
        ReentrantLock turn = new ReentrantLock(true);
        this.shells = new Subshells(() -> new Shell(new CellLane(sockets, outbox, execute, engine::beginTurn, turn)));
        QuestionHandlers about = new QuestionHandlers(engine);
        Dispatcher dispatcher = new Dispatcher(outbox, inputDesk, shells)
                .atOnce("kernel_info_request", new KernelInfo())
                .atOnce("connect_request", new ConnectHandler(connection))
                .through(history.thread(), "history_request", new HistoryHandler(history))
                .atOnce("comm_info_request", comms.info())
                .handingOver("comm_open", comms::open)
                .handingOver("comm_msg", comms::message)
                .handingOver("comm_close", comms::close)
                .atOnce("interrupt_request", request -> interrupt())
                .atOnce("shutdown_request", request -> shutdown(request, outbox), this::end)
                .atOnce("debug_request", new DebugHandler())
                .atOnce("create_subshell_request", shells.create())
                .atOnce("delete_subshell_request", shells.delete())
                .atOnce("list_subshell_request", shells.list())
                .through(usage, "usage_request", new UsageHandler())
                .asQuestion("is_complete_request", about.isComplete())
                .asQuestion("complete_request", about.complete())
                .asQuestion("inspect_request", about.inspect());
        shells.start();
        sockets.start(dispatcher);
    }

    /**
     * Starts to listen; the history of cells ends with this kernel.
     *
     * @param engineStart opens the engine; called once, on a thread of its own. What it throws is what cells then fail with
     * @throws IllegalStateException if a port of the connection is taken
     */
    public static KernelServer start(ConnectionFile connection, Supplier<? extends CellEngine> engineStart) {
        return new KernelServer(connection, Optional.empty(), engineStart);
    }

    /**
     * Starts to listen.
     *
     * @param historyFile where cells are kept for later kernels, if they are
     * @param engineStart opens the engine; called once, on a thread of its own. What it throws is what cells then fail with
     * @throws IllegalStateException if a port of the connection is taken
     */
    public static KernelServer start(
            ConnectionFile connection, Optional<Path> historyFile, Supplier<? extends CellEngine> engineStart) {
        return new KernelServer(connection, historyFile, engineStart);
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

    /** Returns what completes as soon as the end is asked for, before anything has been closed. */
    public CompletableFuture<Ending> ending() {
        return ending.copy();
    }

    /** Ends the engine, aborts what waits, sends what is queued and closes the sockets; takes a second at most. */
    @Override
    public void close() {
        if (!closed.compareAndSet(false, true)) {
            return;
        }
        ending.complete(Ending.CLOSED);
        outbox.hurry();
        inputDesk.cancel("The kernel is shutting down.");
        shells.close();
        try {
            engine.interrupt();
            engine.close(WORKER_PATIENCE);
            shells.awaitEnd(CELL_PATIENCE);
            history.close(HISTORY_PATIENCE);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        } finally {
            comms.close();
            usage.shutdownNow();
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
