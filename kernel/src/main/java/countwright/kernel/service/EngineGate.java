package countwright.kernel.service;

import countwright.kernel.cell.CellEngine;
import java.time.Duration;
import java.util.Optional;
import java.util.concurrent.CancellationException;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ExecutionException;
import java.util.function.Consumer;
import java.util.function.Supplier;

/** The engine, which starts behind the sockets: whoever needs it waits here until it is up. */
final class EngineGate {

    private final CompletableFuture<CellEngine> engine = new CompletableFuture<>();
    private volatile Turn turn = new Turn(new CompletableFuture<>());

    /** Starts the engine on a thread of its own. */
    EngineGate(Supplier<? extends CellEngine> start) {
        Thread thread = new Thread(
                () -> {
                    try {
                        engine.complete(start.get());
                    } catch (RuntimeException | Error e) {
                        engine.completeExceptionally(e);
                    }
                },
                "countwright-engine-start");
        thread.setDaemon(true);
        thread.start();
    }

    /** Waits for the engine. */
    CellEngine await() throws InterruptedException, NoEngineException {
        return await(engine.copy());
    }

    /** Has an action run once the engine is up. */
    void whenStarted(Consumer<CellEngine> action) {
        var unused = engine.thenAccept(action);
    }

    /** Begins the turn of a cell: from now on an interrupt is meant for it. Called by the thread that runs cells. */
    void beginTurn() {
        turn = new Turn(engine.copy());
    }

    /** Returns the turn of the cell that runs. */
    Turn turn() {
        return turn;
    }

    /** Asks the running cell to stop, also one that is about to run or waits for the engine. */
    void interrupt() {
        turn.interrupt();
        ready().ifPresent(CellEngine::interrupt);
    }

    /** Ends the engine; one that is still starting is ended when it is up. */
    void close(Duration patience) {
        Optional<CellEngine> now = ready();
        if (now.isPresent()) {
            now.get().close(patience);
        } else {
            CompletableFuture<Void> unused = engine.thenAccept(late -> late.close(patience));
        }
    }

    private Optional<CellEngine> ready() {
        return engine.isDone() && !engine.isCompletedExceptionally() ? Optional.of(engine.join()) : Optional.empty();
    }

    private static CellEngine await(CompletableFuture<CellEngine> wait) throws InterruptedException, NoEngineException {
        try {
            return wait.get();
        } catch (CancellationException e) {
            throw interruptedBefore(e);
        } catch (ExecutionException e) {
            Throwable cause = Optional.ofNullable(e.getCause()).orElse(e);
            throw new NoEngineException(
                    "WorkerStartError",
                    "The process that runs cells could not be started: "
                            + Optional.ofNullable(cause.getMessage())
                                    .orElse(cause.getClass().getSimpleName())
                            + " Restart the kernel; if it happens again, see the kernel's log.",
                    cause);
        }
    }

    private static NoEngineException interruptedBefore(Throwable cause) {
        return new NoEngineException("Interrupted", "The cell was interrupted before it began.", cause);
    }

    /** One cell's use of the engine. */
    static final class Turn {

        private final CompletableFuture<CellEngine> wait;
        private volatile boolean interrupted;

        private Turn(CompletableFuture<CellEngine> wait) {
            this.wait = wait;
        }

        /** Waits for the engine, or for an interrupt. */
        CellEngine await() throws InterruptedException, NoEngineException {
            CellEngine engine = EngineGate.await(wait);
            if (interrupted) {
                throw interruptedBefore(new CancellationException());
            }
            return engine;
        }

        /** Returns whether an interrupt was meant for this turn. */
        boolean isInterrupted() {
            return interrupted;
        }

        private void interrupt() {
            interrupted = true;
            wait.completeExceptionally(new CancellationException());
        }
    }

    /** Why there is no engine, in the words the person is to read. */
    static final class NoEngineException extends Exception {

        private static final long serialVersionUID = 1L;

        private final String kind;

        NoEngineException(String kind, String message, Throwable cause) {
            super(message, cause);
            this.kind = kind;
        }

        String kind() {
            return kind;
        }

        String text() {
            return Optional.ofNullable(getMessage()).orElse(kind);
        }
    }
}
