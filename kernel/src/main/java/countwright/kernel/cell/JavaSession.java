package countwright.kernel.cell;

import countwright.kernel.cell.CellSplitter.Piece;
import countwright.kernel.worker.Worker;
import countwright.kernel.worker.WorkerSettings;
import countwright.show.MimeBundle;
import countwright.worker.Frame;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.time.Duration;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.locks.ReentrantLock;
import java.util.function.Supplier;
import jdk.jshell.JShell;
import jdk.jshell.JShellException;
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
    private final CellEvents events = new CellEvents();
    private final CellMap cells = new CellMap();
    private final WorkerExecution execution = new WorkerExecution(worker, compilerLock);
    private final JShell shell;
    private final CodeAssistant assistant;

    private JavaSession(WorkerSettings settings) {
        shell = JShell.builder()
                .executionEngine(new GivenExecution(execution), Map.of())
                // Without this the compiler would see the kernel's own class path.
                .compilerOptions("--class-path", settings.classPathText())
                .build();
        assistant = new CodeAssistant(shell.sourceCodeAnalysis());
    }

    /** Starts the worker and warms the compiler at the same time; returns when the first cell can run. */
    static JavaSession start(WorkerSettings settings) {
        JavaSession session = new JavaSession(settings);
        Thread starter = new Thread(() -> session.startWorker(settings), "start worker");
        starter.setDaemon(true);
        starter.start();
        session.warmUp();
        return session;
    }

    private void startWorker(WorkerSettings settings) {
        try {
            Worker started = Worker.start(settings, events);
            events.speaksFor(started);
            worker.complete(started);
        } catch (IOException | RuntimeException e) {
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
            shell.eval("1 + 1").forEach(event -> shell.drop(event.snippet()));
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
            return runPieces(cell, listener, stopRequested);
        } finally {
            runner.ifPresent(Worker::cellEnded);
        }
    }

    private CellOutcome runPieces(CellText cell, CellListener listener, Supplier<Boolean> stopRequested) {
        return holdingCompiler(() -> {
            List<Piece> pieces = CellSplitter.split(cell.code(), shell.sourceCodeAnalysis());
            if (!pieces.isEmpty() && !pieces.get(pieces.size() - 1).whole()) {
                // Half a statement at the end: say so before anything has run.
                return runPiece(pieces.get(pieces.size() - 1), cell, listener, Frame.Want.NOTHING);
            }
            CellOutcome outcome = new CellOutcome.Success(Optional.empty());
            for (int i = 0; i < pieces.size(); i++) {
                if (stopRequested.get()) {
                    return interrupted(cell);
                }
                Piece piece = pieces.get(i);
                boolean shown = i == pieces.size() - 1 && piece.showsValue();
                outcome = runPiece(piece, cell, listener, shown ? Frame.Want.BUNDLE : Frame.Want.NOTHING);
                if (outcome instanceof CellOutcome.Failure) {
                    return stopRequested.get() && loss().isEmpty() ? interrupted(cell) : outcome;
                }
            }
            return stopRequested.get() ? interrupted(cell) : outcome;
        });
    }

    private CellOutcome runPiece(Piece piece, CellText cell, CellListener listener, Frame.Want want) {
        execution.prepare(want);
        List<SnippetEvent> events;
        try {
            events = shell.eval(piece.source());
        } catch (IllegalStateException e) {
            return lost(execution.loss().orElse("the compiler's session has ended"));
        }
        if (execution.loss().isPresent()) {
            return lost(execution.loss().get());
        }
        CellOutcome outcome = new CellOutcome.Success(Optional.empty());
        for (SnippetEvent event : events) {
            if (event.causeSnippet() == null) {
                outcome = outcomeOf(event, piece, cell, listener);
            }
        }
        return outcome;
    }

    private CellOutcome outcomeOf(SnippetEvent event, Piece piece, CellText cell, CellListener listener) {
        Snippet snippet = event.snippet();
        cells.remember(snippet, cell, piece.start());
        CompileReport compileReport = new CompileReport(shell);
        switch (event.status()) {
            case REJECTED, RECOVERABLE_NOT_DEFINED, NONEXISTENT -> {
                CellOutcome.Failure failure = compileReport.of(snippet, piece, cell);
                shell.drop(snippet);
                return failure;
            }
            case RECOVERABLE_DEFINED ->
                compileReport
                        .unresolved(snippet)
                        .ifPresent(note -> listener.output(
                                CellListener.Stream.ERR, note + " It can be called once that is declared.\n"));
            case VALID, DROPPED, OVERWRITTEN -> {}
        }
        if (execution.wasStopped()) {
            return interrupted(cell);
        }
        JShellException exception = event.exception();
        if (exception != null) {
            return new ExceptionReport(cells).of(exception);
        }
        return new CellOutcome.Success(valueOf(snippet));
    }

    /** Takes the value of an expression, and lets go of the name JShell made up for it. */
    private Optional<MimeBundle> valueOf(Snippet snippet) {
        Optional<MimeBundle> value = execution.value();
        if (snippet.subKind() == Snippet.SubKind.TEMP_VAR_EXPRESSION_SUBKIND) {
            // Each such name would make every later snippet a little slower to compile.
            shell.drop(snippet);
            return value;
        }
        return snippet.kind() == Snippet.Kind.EXPRESSION ? value : Optional.empty();
    }

    /** Says that a cell was interrupted. */
    static CellOutcome.Failure interrupted(CellText cell) {
        String message = "Interrupted: " + cell.name() + " was stopped before its end. Variables are kept.";
        return new CellOutcome.Failure("Interrupted", message, List.of(message));
    }

    /** Says that the worker is gone. */
    static CellOutcome.Failure lost(String how) {
        return new CellOutcome.Failure(
                "WorkerLost",
                "the worker that ran this cell is gone: " + how,
                List.of(
                        "The worker that ran this cell is gone: " + how + ".",
                        "What earlier cells declared is lost with it. A fresh worker is ready: run again the cells you need."));
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
