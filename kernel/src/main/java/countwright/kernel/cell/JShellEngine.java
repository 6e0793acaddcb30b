package countwright.kernel.cell;

import countwright.kernel.worker.WorkerSettings;
import countwright.show.MimeBundle;
import java.time.Duration;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.CompletionException;
import java.util.concurrent.atomic.AtomicBoolean;

/** Cells compiled by JShell in this process and run in a worker, which is replaced whenever it is lost. */
public final class JShellEngine implements CellEngine {

    private final WorkerSettings settings;
    private final Object replacing = new Object();
    private volatile CompletableFuture<JavaSession> session;
    private final AtomicBoolean stopRequested = new AtomicBoolean();
    private volatile boolean running;
    private volatile Optional<String> lossToReport = Optional.empty();
    private volatile boolean closed;

    private JShellEngine(WorkerSettings settings) {
        this.settings = settings;
        this.session = startSession();
    }

    /** Starts a session behind the caller's back and returns at once; the first use waits for it. */
    public static JShellEngine start(WorkerSettings settings) {
        return new JShellEngine(settings);
    }

    @Override
    public CellOutcome evaluate(String code, int executionCount, CellListener listener) {
        return run(new CellText("cell [" + executionCount + "]", code), listener);
    }

    @Override
    public Map<String, CellOutcome> evaluateExpressions(Map<String, String> expressions) {
        Map<String, CellOutcome> outcomes = new LinkedHashMap<>();
        expressions.forEach((name, code) ->
                outcomes.put(name, run(new CellText("expression '" + name + "'", code), new Unheard())));
        return outcomes;
    }

    private CellOutcome run(CellText cell, CellListener listener) {
        stopRequested.set(false);
        running = true;
        try {
            return runInSession(cell, listener);
        } finally {
            running = false;
        }
    }

    private CellOutcome runInSession(CellText cell, CellListener listener) {
        CompletableFuture<JavaSession> starting = session;
        JavaSession current;
        try {
            current = starting.join();
        } catch (CompletionException e) {
            replace(starting);
            Throwable cause = e.getCause() == null ? e : e.getCause();
            String message = "the worker that runs cells could not be started: " + cause.getMessage();
            return new CellOutcome.Failure("WorkerLost", message, List.of(message));
        }
        lossToReport.ifPresent(how -> listener.output(
                CellListener.Stream.ERR,
                "Note: the worker was lost between two cells (" + how
                        + "), and what earlier cells declared with it. This cell runs in a fresh one.\n"));
        lossToReport = Optional.empty();
        CellOutcome outcome = current.run(cell, listener, stopRequested::get);
        if (current.loss().isPresent()) {
            replace(starting);
            current.close(Duration.ZERO);
        }
        return outcome;
    }

    @Override
    public Completeness completeness(String code) {
        return session.join().completeness(code);
    }

    @Override
    public Completions complete(String code, int cursor) {
        return session.join().complete(code, cursor);
    }

    @Override
    public MimeBundle inspect(String code, int cursor, Detail detail) {
        return session.join().inspect(code, cursor, detail);
    }

    @Override
    public void interrupt() {
        if (!running) {
            return;
        }
        stopRequested.set(true);
        CompletableFuture<JavaSession> current = session;
        if (current.isDone() && !current.isCompletedExceptionally()) {
            current.join().interrupt();
        }
    }

    @Override
    public void close(Duration patience) {
        closed = true;
        CompletableFuture<JavaSession> current = session;
        if (current.isDone() && !current.isCompletedExceptionally()) {
            current.join().close(patience);
        } else {
            var unused = current.thenAccept(late -> late.close(patience));
        }
    }

    private CompletableFuture<JavaSession> startSession() {
        CompletableFuture<JavaSession> starting = new CompletableFuture<>();
        Thread thread = new Thread(
                () -> {
                    try {
                        JavaSession started = JavaSession.start(settings);
                        Optional<String> stillborn = started.loss();
                        if (stillborn.isPresent()) {
                            throw new IllegalStateException(stillborn.get());
                        }
                        starting.complete(started);
                        started.onLoss(() -> replaceIdle(starting, started));
                    } catch (RuntimeException | Error e) {
                        starting.completeExceptionally(e);
                    }
                },
                "start session");
        thread.setDaemon(true);
        thread.start();
        return starting;
    }

    /** A worker lost while a cell runs is reported by that cell; one lost in between, by the next. */
    private void replaceIdle(CompletableFuture<JavaSession> lost, JavaSession old) {
        if (!running && !closed && session == lost) {
            lossToReport = old.loss();
            replace(lost);
            old.close(Duration.ZERO);
        }
    }

    private void replace(CompletableFuture<JavaSession> lost) {
        synchronized (replacing) {
            if (!closed && session == lost) {
                session = startSession();
            }
        }
    }

    /** Hears nothing: expressions asked for by a front end leave no output. */
    private static final class Unheard implements CellListener {

        @Override
        public void output(Stream stream, String text) {}

        @Override
        public void display(MimeBundle bundle, Optional<String> displayId) {}

        @Override
        public void update(MimeBundle bundle, String displayId) {}

        @Override
        public void clear(countwright.show.Stage.Clearing when) {}

        @Override
        public void ask(InputRequest request) {
            request.refuse("an expression evaluated for the front end cannot ask for input");
        }
    }
}
