package countwright.kernel.cell;

import countwright.kernel.worker.WorkerSettings;
import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import java.time.Duration;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.CompletionException;
import java.util.concurrent.CopyOnWriteArrayList;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.concurrent.atomic.AtomicInteger;
import java.util.function.Function;

/** Cells compiled by JShell in this process and run in a worker, which is replaced whenever it is lost. */
public final class JShellEngine implements CellEngine {

    /** How often a question is asked while sessions come and go. */
    private static final int MOST_ATTEMPTS = 4;

    /** How long a question waits for the session that replaces a lost one. */
    private static final Duration REPLACEMENT = Duration.ofSeconds(20);

    private final SessionReserve reserve;
    private final SucceededCells succeeded = new SucceededCells();
    private final AtomicBoolean stopRequested = new AtomicBoolean();

    /** Guards what decides which session the next cell runs in, and which cell tells of a loss. */
    private final Object turns = new Object();

    // Written under the lock, read without it where any recent value will do.
    private volatile CompletableFuture<JavaSession> session;
    private volatile boolean running;
    private Optional<String> lossToReport = Optional.empty();
    private boolean closed;
    private CellListener lastListener = new Unheard();

    /** Completed by an interrupt, so that a cell need not wait for a session that is still starting. */
    private volatile CompletableFuture<Void> stop = new CompletableFuture<>();

    private static final int MOST_STARTS_IN_A_ROW = 4;
    private static final long START_AGAIN_MILLIS = 200;

    private final AtomicInteger startsFailed = new AtomicInteger();
    private final List<Runnable> lossActions = new CopyOnWriteArrayList<>();

    private JShellEngine(WorkerSettings settings) {
        this.reserve = new SessionReserve(settings);
        this.session = reserve.take();
        watch(session);
    }

    /** Starts a session behind the caller's back and returns at once; the first use waits for it. */
    public static JShellEngine start(WorkerSettings settings) {
        return new JShellEngine(settings);
    }

    @Override
    public CellOutcome evaluate(String code, int executionCount, CellListener listener) {
        lastListener = listener;
        CellText cell = new CellText("cell [" + executionCount + "]", code);
        return run(cell, listener, code.isBlank() ? Remembering.NO : Remembering.YES);
    }

    @Override
    public Map<String, CellOutcome> evaluateExpressions(Map<String, String> expressions) {
        CellListener listener = new WithoutQuestions(lastListener);
        Map<String, CellOutcome> outcomes = new LinkedHashMap<>();
        expressions.forEach((name, code) ->
                outcomes.put(name, run(new CellText("expression '" + name + "'", code), listener, Remembering.NO)));
        return outcomes;
    }

    private CellOutcome run(CellText cell, CellListener listener, Remembering remembering) {
        CompletableFuture<JavaSession> mine;
        synchronized (turns) {
            stop = new CompletableFuture<>();
            stopRequested.set(false);
            running = true;
            // Asked only now: an interrupt that comes later finds the cell running.
            if (listener.isStopRequested()) {
                stopRequested.set(true);
                stop.complete(null);
            }
            mine = session;
            lossToReport.ifPresent(how -> listener.output(
                    CellListener.Stream.ERR,
                    "Note: the worker was lost between two cells (" + how
                            + "), and what earlier cells declared with it. This cell runs in a fresh one.\n"
                            + offer().map(line -> line + "\n").orElse("")));
            lossToReport = Optional.empty();
        }
        boolean lossTold = false;
        try {
            CompletableFuture.anyOf(mine, stop).join();
            if (!mine.isDone()) {
                return CellRun.interrupted(cell);
            }
            JavaSession runner = mine.join();
            CellOutcome outcome = runner.run(cell, listener, succeeded, stopRequested::get);
            if (outcome instanceof CellOutcome.Failure failure && failure.name().equals(WorkerExecution.LOST)) {
                lossTold = true;
                succeeded.sessionLost();
                return withOffer(failure);
            }
            if (outcome instanceof CellOutcome.Failure failure
                    && failure.name().equals(CompileReport.NAME)
                    && !runner.hasRestored()) {
                // A name that is not known is most likely one that went with the worker.
                return withOffer(failure);
            }
            if (outcome instanceof CellOutcome.Success && remembering == Remembering.YES && !runner.hasRestored()) {
                succeeded.add(cell);
            }
            return outcome;
        } catch (CompletionException e) {
            lossTold = true;
            Throwable cause = e.getCause() == null ? e : e.getCause();
            String message = "the worker that runs cells could not be started: " + cause.getMessage();
            return new CellOutcome.Failure(WorkerExecution.LOST, message, List.of(message));
        } finally {
            endTurn(mine, lossTold);
        }
    }

    /** Says what can be done about the loss, in one line; empty if no cell had succeeded. */
    private Optional<String> offer() {
        int count = succeeded.lostCount();
        if (count == 0) {
            return Optional.empty();
        }
        String cells = count == 1 ? "the cell that had succeeded" : "the " + count + " cells that had succeeded";
        return Optional.of("Session.restore() runs " + cells + " again, in order.");
    }

    private CellOutcome.Failure withOffer(CellOutcome.Failure failure) {
        List<String> lines = new ArrayList<>(failure.traceback());
        offer().ifPresent(lines::add);
        return new CellOutcome.Failure(failure.name(), failure.message(), lines);
    }

    private void endTurn(CompletableFuture<JavaSession> mine, boolean lossTold) {
        synchronized (turns) {
            running = false;
            if (!mine.isDone()) {
                return;
            }
            Optional<String> loss = mine.isCompletedExceptionally()
                    ? Optional.of("it could not be started")
                    : mine.join().loss();
            if (loss.isPresent()) {
                replace(mine, lossTold ? Optional.empty() : loss);
            }
        }
    }

    @Override
    public Completeness completeness(String code) {
        return asking(each -> each.completeness(code));
    }

    @Override
    public Completions complete(String code, int cursor) {
        return asking(each -> each.complete(code, cursor));
    }

    @Override
    public MimeBundle inspect(String code, int cursor, Detail detail) {
        return asking(each -> each.inspect(code, cursor, detail));
    }

    /**
     * Asks the compiler something. With its worker JShell closes itself: a question that comes then, or is under way, is
     * asked again of the session that takes the place of the lost one.
     */
    private <T> T asking(Function<JavaSession, T> question) {
        for (int attempt = 1; true; attempt++) {
            CompletableFuture<JavaSession> asked = session;
            try {
                return question.apply(asked.join());
            } catch (RuntimeException e) {
                // Of many kinds: closed, or closing in the middle of an answer.
                boolean lost =
                        asked.isCompletedExceptionally() || asked.join().loss().isPresent();
                if (!lost || attempt == MOST_ATTEMPTS || !awaitReplacement(asked)) {
                    throw e;
                }
            }
        }
    }

    private boolean awaitReplacement(CompletableFuture<JavaSession> lost) {
        long deadline = System.nanoTime() + REPLACEMENT.toNanos();
        synchronized (turns) {
            while (session == lost && !closed) {
                long left = (deadline - System.nanoTime()) / 1_000_000;
                if (left <= 0) {
                    return false;
                }
                try {
                    turns.wait(left);
                } catch (InterruptedException closing) {
                    Thread.currentThread().interrupt();
                    return false;
                }
            }
            return !closed;
        }
    }

    @Override
    public void receive(CommMessage message, CellListener listener, Runnable handled) {
        JavaSession current;
        try {
            current = session.join();
        } catch (CompletionException e) {
            handled.run();
            return;
        }
        current.receive(message, listener, handled);
    }

    @Override
    public void whenWorkerIsLost(Runnable action) {
        lossActions.add(action);
    }

    @Override
    public void interrupt() {
        CompletableFuture<JavaSession> current = session;
        boolean isStarted = current.isDone() && !current.isCompletedExceptionally();
        if (running) {
            stopRequested.set(true);
            stop.complete(null);
            if (isStarted) {
                current.join().interrupt();
            }
        } else if (isStarted) {
            current.join().interruptHandler();
        }
    }

    @Override
    public void close(Duration patience) {
        CompletableFuture<JavaSession> current;
        synchronized (turns) {
            closed = true;
            turns.notifyAll();
            current = session;
        }
        reserve.close();
        if (current.isDone() && !current.isCompletedExceptionally()) {
            current.join().close(patience);
        } else {
            var unused = current.thenAccept(late -> late.close(patience));
        }
    }

    /** Only called once it is the session that the next cell runs in: it may be lost already. */
    private void watch(CompletableFuture<JavaSession> taken) {
        var unused = taken.whenComplete((started, failure) -> {
            if (failure == null) {
                startsFailed.set(0);
                started.onLoss(() -> replaceIdle(taken, started));
            } else if (startsFailed.incrementAndGet() <= MOST_STARTS_IN_A_ROW) {
                // Killed at birth, as when memory is short for a moment. What fails again and again waits for the next
                // cell.
                CompletableFuture.delayedExecutor(START_AGAIN_MILLIS, TimeUnit.MILLISECONDS)
                        .execute(() -> replaceUnstarted(taken));
            }
        });
    }

    private void replaceUnstarted(CompletableFuture<JavaSession> failed) {
        synchronized (turns) {
            if (!running) {
                replace(failed, Optional.empty());
            }
        }
    }

    /** A worker lost while a cell runs is told of by that cell and replaced when it ends; one lost in between, at once. */
    private void replaceIdle(CompletableFuture<JavaSession> lost, JavaSession old) {
        synchronized (turns) {
            if (!running) {
                // One that was lost in reserve, or before its first cell, has cost nobody anything.
                replace(lost, old.isUsed() ? old.loss() : Optional.empty());
            }
        }
    }

    private void replace(CompletableFuture<JavaSession> lost, Optional<String> toReport) {
        CompletableFuture<JavaSession> fresh;
        synchronized (turns) {
            if (closed || session != lost) {
                return;
            }
            succeeded.sessionLost();
            if (toReport.isPresent()) {
                lossToReport = toReport;
            }
            fresh = reserve.take();
            session = fresh;
            turns.notifyAll();
        }
        watch(fresh);
        lossActions.forEach(Runnable::run);
        if (!lost.isCompletedExceptionally()) {
            lost.join().close(Duration.ZERO);
        }
    }

    /** Whether a cell that succeeds is run again by {@code Session.restore()}. */
    private enum Remembering {
        YES,
        NO
    }
}
