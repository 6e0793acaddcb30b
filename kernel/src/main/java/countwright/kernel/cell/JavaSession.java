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
    private final ReentrantLock compilerLock = new ReentrantLock();
    private final CellMap cells = new CellMap();
    private final CellEvents events = new CellEvents(cells);
    private final WorkerExecution execution = new WorkerExecution(worker, compilerLock);
    private final JShell shell;
    private final SnippetLedger ledger;
    private final CodeAssistant assistant;

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

    /** Starts the worker and warms the compiler at the same time; returns when the first cell can run. */
    static JavaSession start(WorkerSettings settings) {
        JavaSession session = new JavaSession(settings);
        Thread starter = new Thread(() -> session.startWorker(settings), "start worker");
        starter.setDaemon(true);
        starter.start();
        try {
            session.warmUp();
        } catch (RuntimeException | Error e) {
            // Else the worker would stay, and another with every try.
            session.close(Duration.ZERO);
            throw e;
        }
        return session;
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

    private void warmUp() {
        holdingCompiler(() -> {
            for (String declaration : SessionImports.read()) {
                for (SnippetEvent event : shell.eval(declaration)) {
                    if (event.status() == Snippet.Status.REJECTED) {
                        throw new IllegalStateException("a session import does not compile: " + declaration);
                    }
                }
            }
            // The first evaluation is ten times slower than the next, in the compiler as in the worker.
            execution.prepare(Frame.Want.BUNDLE);
            shell.eval("1 + 1").forEach(event -> ledger.forget(event.snippet()));
            return true;
        });
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

    /** Runs a cell; {@code stopRequested} is asked between its pieces. */
    CellOutcome run(CellText cell, CellListener listener, Supplier<Boolean> stopRequested) {
        events.listenWith(listener);
        execution.askBeforeRunning(stopRequested);
        Optional<Worker> runner = startedWorker();
        runner.ifPresent(Worker::cellStarted);
        try {
            return holdingCompiler(
                    () -> new CellRun(shell, ledger, execution, cells, cell, listener, stopRequested).run());
        } finally {
            runner.ifPresent(Worker::cellEnded);
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
        return holdingCompiler(() -> assistant.complete(code, cursor));
    }

    MimeBundle inspect(String code, int cursor, CellEngine.Detail detail) {
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
