package countwright.kernel.cell;

import countwright.kernel.worker.WorkerSettings;
import java.time.Duration;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.Executors;
import java.util.concurrent.RejectedExecutionException;
import java.util.concurrent.ScheduledExecutorService;
import java.util.concurrent.TimeUnit;

/**
 * Starts sessions, and keeps one started in reserve: a lost session is then replaced in the time it takes to run a cell,
 * while a cold start takes a second on a busy machine. The reserve costs one idle JVM.
 */
final class SessionReserve implements AutoCloseable {

    /** The first cells of a fresh kernel should not compete with the start of a session that may never be needed. */
    private static final long FIRST_DELAY_MILLIS = 3_000;

    private static final long LATER_DELAY_MILLIS = 300;

    /** A reserve that dies by itself, as where memory is short, should not be started again and again without pause. */
    private static final long DEATH_DELAY_MILLIS = 5_000;

    /** A worker can be lost while it starts, which is nobody's fault and needs no report. */
    private static final int ATTEMPTS = 2;

    private final WorkerSettings settings;
    private final ScheduledExecutorService clock = Executors.newSingleThreadScheduledExecutor(task -> {
        Thread thread = new Thread(task, "session reserve");
        thread.setDaemon(true);
        return thread;
    });
    private Optional<CompletableFuture<JavaSession>> reserve = Optional.empty();
    private long delayMillis = FIRST_DELAY_MILLIS;
    private boolean closed;

    SessionReserve(WorkerSettings settings) {
        this.settings = settings;
    }

    /** Returns the session in reserve, or else one that is just being started; the caller closes it. */
    synchronized CompletableFuture<JavaSession> take() {
        Optional<CompletableFuture<JavaSession>> usable = reserve.filter(SessionReserve::isUsable);
        reserve = Optional.empty();
        CompletableFuture<JavaSession> taken = usable.orElseGet(this::start);
        long delay = delayMillis;
        delayMillis = LATER_DELAY_MILLIS;
        var unused = taken.thenRun(() -> refillAfter(delay));
        return taken;
    }

    private static boolean isUsable(CompletableFuture<JavaSession> session) {
        return !session.isDone()
                || (!session.isCompletedExceptionally() && session.join().loss().isEmpty());
    }

    private void refillAfter(long millis) {
        try {
            var unused = clock.schedule(this::refill, millis, TimeUnit.MILLISECONDS);
        } catch (RejectedExecutionException closing) {
            return;
        }
    }

    private synchronized void refill() {
        if (closed || reserve.isPresent() || settings.recordsClasses()) {
            return;
        }
        CompletableFuture<JavaSession> starting = start();
        reserve = Optional.of(starting);
        var unused = starting.thenAccept(started -> started.onLoss(() -> dropped(starting)));
    }

    private synchronized void dropped(CompletableFuture<JavaSession> lost) {
        if (reserve.filter(kept -> kept == lost).isPresent()) {
            reserve = Optional.empty();
            lost.join().close(Duration.ZERO);
            refillAfter(DEATH_DELAY_MILLIS);
        }
    }

    private CompletableFuture<JavaSession> start() {
        CompletableFuture<JavaSession> starting = new CompletableFuture<>();
        Thread thread = new Thread(
                () -> {
                    try {
                        starting.complete(startLiving());
                    } catch (RuntimeException | Error e) {
                        starting.completeExceptionally(e);
                    }
                },
                "start session");
        thread.setDaemon(true);
        thread.start();
        return starting;
    }

    private JavaSession startLiving() {
        for (int attempt = 1; true; attempt++) {
            try {
                JavaSession started = JavaSession.start(settings);
                Optional<String> stillborn = started.loss();
                if (stillborn.isEmpty()) {
                    return started;
                }
                started.close(Duration.ZERO);
                throw new IllegalStateException(stillborn.get());
            } catch (IllegalStateException e) {
                if (attempt == ATTEMPTS) {
                    throw e;
                }
            }
        }
    }

    @Override
    public void close() {
        Optional<CompletableFuture<JavaSession>> last;
        synchronized (this) {
            closed = true;
            last = reserve;
            reserve = Optional.empty();
        }
        clock.shutdownNow();
        last.ifPresent(session -> {
            var unused = session.thenAccept(late -> late.close(Duration.ZERO));
        });
    }
}
