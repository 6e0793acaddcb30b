package countwright.kernel.cell;

import countwright.kernel.worker.Worker;
import countwright.kernel.worker.WorkerSettings;
import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.worker.Frame;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.time.Duration;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.CompletionException;
import java.util.concurrent.locks.ReentrantLock;
import java.util.function.Supplier;
import jdk.jshell.JShell;
import jdk.jshell.Snippet;
import jdk.jshell.SnippetEvent;
import jdk.jshell.spi.ExecutionControl;
import jdk.jshell.spi.ExecutionControlProvider;
import jdk.jshell.spi.ExecutionEnv;

/**
 * One compiler and one worker, from the worker's start to its loss. JShell is not made for several threads: everything
 * that touches it holds the compiler lock, which is let go while user code runs.
 */
final class JavaSession {

    private final CompletableFuture<Worker> worker = new CompletableFuture<>();
    private final ReentrantLock compilerLock = new ReentrantLock(true);
    private final CellMap cells = new CellMap();
    private final CellEvents events = new CellEvents(cells);
    private final WorkerExecution execution = new WorkerExecution(worker, compilerLock);
    /** Held from the first piece of a cell to its last, while the compiler lock comes and goes. */
    private final ReentrantLock evaluating = new ReentrantLock();

    private final CompletableFuture<Void> imports = new CompletableFuture<>();
    private final JShell shell;
    private final SnippetLedger ledger;
    private final CodeAssistant assistant;
    private volatile boolean used;
    private volatile boolean restored;

    private JavaSession(WorkerSettings settings) {
        shell = JShell.builder()
                .executionEngine(new GivenExecution(execution), Map.of())
                // Without this the compiler would see the kernel's own class path.
                .compilerOptions("--class-path", settings.classPathText())
                .build();
        ledger = new SnippetLedger(shell);
        execution.doBeforeUnlocking(ledger::showAll);
        assistant = new CodeAssistant(shell.sourceCodeAnalysis());
        var unused = worker.thenCompose(Worker::loss).whenComplete((how, failure) -> events.lose());
    }

    /** Starts the worker, and the compiler at the same time; returns when the worker is there. */
    static JavaSession start(WorkerSettings settings) {
        JavaSession session = new JavaSession(settings);
        runBehind("start worker", () -> session.startWorker(settings));
        runBehind("warm compiler", session::warmUp);
        try {
            var unused = session.worker.join();
            return session;
        } catch (CompletionException e) {
            session.close(Duration.ZERO);
            throw new IllegalStateException(
                    String.valueOf(Optional.ofNullable(e.getCause()).orElse(e).getMessage()), e);
        }
    }

    private static void runBehind(String name, Runnable action) {
        Thread thread = new Thread(action, name);
        thread.setDaemon(true);
        thread.start();
    }

    private void startWorker(WorkerSettings settings) {
        try {
            Worker started = Worker.start(settings, events);
            events.speaksFor(started);
            if (!worker.complete(started)) {
                // The session was closed meanwhile.
                started.close(Duration.ZERO);
            }
        } catch (IOException | RuntimeException | Error e) {
            // Errors too, such as a JDK without the debugger interface: everything waits for this.
            worker.completeExceptionally(e);
        }
    }

    /** Evaluates the imports one by one, so that a cell that names nothing gets its turn in between. */
    private void warmUp() {
        try {
            for (String declaration : SessionImports.read()) {
                holdingCompiler(() -> {
                    for (SnippetEvent event : shell.eval(declaration)) {
                        if (event.status() == Snippet.Status.REJECTED) {
                            throw new IllegalStateException("a session import does not compile: " + declaration);
                        }
                    }
                    return true;
                });
            }
            imports.complete(null);
            evaluateOnce();
        } catch (RuntimeException | Error e) {
            // With the worker gone the session is replaced anyway; otherwise each cell tells of it.
            imports.completeExceptionally(e);
        }
    }

    /** The first evaluation is ten times slower than the next, in the compiler as in the worker. */
    private void evaluateOnce() {
        evaluating.lock();
        try {
            if (!used) {
                holdingCompiler(() -> {
                    execution.prepare(Frame.Want.BUNDLE);
                    shell.eval(ShownValue.statement("1 + 1").orElseThrow())
                            .forEach(event -> ledger.forget(event.snippet()));
                    return true;
                });
            }
        } finally {
            evaluating.unlock();
        }
    }

    /** Waits for the imports where they can matter: a cell without a name in it runs without. */
    private void awaitImports(String code) {
        if (code.codePoints().anyMatch(Character::isJavaIdentifierStart)) {
            imports.join();
        }
    }

    /** Returns how the worker was lost, if it was. */
    Optional<String> loss() {
        if (worker.isCompletedExceptionally()) {
            return execution.loss();
        }
        Worker started = worker.getNow(null);
        return started != null && started.loss().isDone()
                ? Optional.of(started.loss().join())
                : Optional.empty();
    }

    /** Runs an action when the worker is lost. */
    void onLoss(Runnable action) {
        var unused = worker.thenCompose(Worker::loss).thenRun(action);
    }

    /** Returns whether a cell has run here. */
    boolean isUsed() {
        return used;
    }

    /** Returns whether the cell that runs, or ran last, has asked to restore the lost session. */
    boolean hasRestored() {
        return restored;
    }

    /**
     * Runs a cell.
     *
     * @param lost what {@code Session.restore()} in the cell runs again
     * @param stopRequested asked between the pieces of the cell
     */
    CellOutcome run(CellText cell, CellListener listener, SucceededCells lost, Supplier<Boolean> stopRequested) {
        used = true;
        // Before anything is waited for, so that an interrupt finds something to stop: a worker that hangs can be ended
        // then.
        Optional<Worker> runner = startedWorker();
        runner.ifPresent(started -> started.cellStarted(lost.lostCount()));
        try {
            awaitImports(cell.code());
            evaluating.lock();
            try {
                return runInTurn(cell, listener, lost, stopRequested);
            } finally {
                evaluating.unlock();
            }
        } finally {
            runner.ifPresent(Worker::cellEnded);
        }
    }

    private CellOutcome runInTurn(
            CellText cell, CellListener listener, SucceededCells lost, Supplier<Boolean> stopRequested) {
        restored = false;
        events.listenWith(listener);
        execution.askBeforeRunning(stopRequested);
        RestoreRun restore = new RestoreRun(
                lost, listener, stopRequested, (again, quiet) -> runAgain(again, quiet, listener, stopRequested));
        Supplier<Optional<CellOutcome.Failure>> restoreIfAsked = () -> {
            if (!events.takeRestoreAsked()) {
                return Optional.empty();
            }
            restored = true;
            return restore.run();
        };
        return holdingCompiler(() ->
                new CellRun(shell, ledger, execution, cells, cell, listener, stopRequested, restoreIfAsked).run());
    }

    /** Runs a lost cell again in the turn of another, which asked for it and is between two of its pieces. */
    private CellOutcome runAgain(
            CellText cell, CellListener quiet, CellListener after, Supplier<Boolean> stopRequested) {
        events.listenWith(quiet);
        // What the one before has redirected must not reach this one.
        startedWorker().ifPresent(started -> started.send(new Frame.CellStarted(0)));
        try {
            // Asked for by a cell run again, restoring is what is under way already.
            return new CellRun(shell, ledger, execution, cells, cell, quiet, stopRequested, Optional::empty).run();
        } finally {
            events.listenWith(after);
        }
    }

    /** Passes a comm message to its handler, as {@link CellEngine#receive} says. */
    void receive(CommMessage message, CellListener listener, Runnable handled) {
        Optional<Worker> runner = startedWorker();
        Optional<Long> number = runner.isPresent() ? events.expect(listener, handled) : Optional.empty();
        number.ifPresent(each -> runner.orElseThrow().send(new Frame.CommReceived(each, message)));
        if (runner.isEmpty()) {
            handled.run();
        }
    }

    /** Interrupts the comm handler that runs in the worker, if one does. */
    void interruptHandler() {
        startedWorker().ifPresent(runner -> runner.send(new Frame.InterruptHandler()));
    }

    /** Interrupts what runs in the worker. */
    void interrupt() {
        startedWorker().ifPresent(Worker::interrupt);
    }

    private Optional<Worker> startedWorker() {
        return worker.isCompletedExceptionally() ? Optional.empty() : Optional.ofNullable(worker.getNow(null));
    }

    Completeness completeness(String code) {
        return holdingCompiler(() -> assistant.completeness(code));
    }

    Completions complete(String code, int cursor) {
        awaitImports(code);
        return holdingCompiler(() -> assistant.complete(code, cursor));
    }

    MimeBundle inspect(String code, int cursor, CellEngine.Detail detail) {
        awaitImports(code);
        return holdingCompiler(() -> assistant.inspect(code, cursor, detail));
    }

    void close(Duration patience) {
        worker.completeExceptionally(new UncheckedIOException(new IOException("the session is closed")));
        startedWorker().ifPresent(started -> started.close(patience));
        // JShell's own close would wait for the compiler lock's holder; there is nothing it holds outside this process.
    }

    private <T> T holdingCompiler(Supplier<T> action) {
        compilerLock.lock();
        try {
            return action.get();
        } finally {
            compilerLock.unlock();
        }
    }

    /** Hands JShell the execution made for it. */
    private record GivenExecution(ExecutionControl execution) implements ExecutionControlProvider {

        @Override
        public String name() {
            return "countwright";
        }

        @Override
        public ExecutionControl generate(ExecutionEnv environment, Map<String, String> parameters) {
            return execution;
        }
    }
}
