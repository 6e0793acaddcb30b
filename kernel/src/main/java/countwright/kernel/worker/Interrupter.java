package countwright.kernel.worker;

import countwright.worker.Frame;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.time.Duration;
import java.util.concurrent.Executors;
import java.util.concurrent.RejectedExecutionException;
import java.util.concurrent.ScheduledExecutorService;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.locks.ReentrantLock;
import java.util.function.Consumer;

/**
 * Stops what runs in a worker: first by Thread.interrupt, for code that listens; after a grace by throwing into the cell
 * thread, again and again, for code that catches everything, and by ending what the thread waits for. If that has not
 * helped the cell says so, and the next interrupt ends the worker itself, which costs the variables.
 */
final class Interrupter implements AutoCloseable {

    private static final Logger LOG = System.getLogger(Interrupter.class.getName());
    private static final long GRACE_MILLIS = 300;
    private static final long RETRY_MILLIS = 60;

    /**
     * For so long a stop waits for a moment in which it leaves no lock held, of which there are many in any loop, and code
     * that catches it has time to end by itself.
     */
    private static final long CARE_MILLIS = 450;

    private static final long AGAIN_SOON_MILLIS = 10;

    /** Before this time a second interrupt is taken for impatience, not for a wish to lose the variables. */
    private static final Duration PATIENCE = Duration.ofMillis(1_500);

    private static final String CANNOT_STOP = """
            The cell does not react to the interrupt: it may be in native code, or wait for a lock that is never freed.
            Wait for it, or interrupt again to end its worker; the variables are lost then.
            """;

    private final Worker worker;
    private final Debugger debugger;
    private final Consumer<String> note;

    /** Two threads: the debugger interface has no timeouts, and a stop that hangs in it must not keep back the note. */
    private final ScheduledExecutorService clock;

    /**
     * Held while a stop is under way, so that it cannot reach the next cell. Not this object's monitor: an interrupt must
     * be taken while the debugger interface hangs.
     */
    private final ReentrantLock forcing = new ReentrantLock();

    private boolean running;
    private boolean stopping;
    private long stoppingSince;
    private volatile boolean killed;

    /** Makes one that tells the person at the front end through {@code note}. */
    Interrupter(Worker worker, Debugger debugger, Consumer<String> note) {
        this.worker = worker;
        this.debugger = debugger;
        this.note = note;
        this.clock = Executors.newScheduledThreadPool(2, task -> {
            Thread thread = new Thread(task, "interrupter");
            thread.setDaemon(true);
            return thread;
        });
    }

    synchronized void cellStarted() {
        running = true;
        stopping = false;
    }

    void cellEnded() {
        forcing.lock();
        try {
            synchronized (this) {
                running = false;
                stopping = false;
            }
        } finally {
            forcing.unlock();
        }
    }

    /** Starts to stop the cell that runs, whatever part of it is under way; does nothing if none runs. */
    synchronized void interrupt() {
        if (!running) {
            return;
        }
        if (stopping) {
            if (System.nanoTime() - stoppingSince > PATIENCE.toNanos()) {
                LOG.log(Level.WARNING, "the cell cannot be stopped; ending worker {0}", worker.processId());
                killed = true;
                worker.kill();
            }
            return;
        }
        stopping = true;
        long since = System.nanoTime();
        stoppingSince = since;
        // Behind the caller's back: a process that has been halted from outside does not take even this.
        schedule(() -> worker.send(new Frame.Interrupt()), 0);
        schedule(() -> stopByForce(Debugger.Effort.STOP, since), GRACE_MILLIS);
        schedule(() -> tellIfStill(since), PATIENCE.toMillis());
    }

    boolean hasKilled() {
        return killed;
    }

    private void stopByForce(Debugger.Effort effort, long since) {
        forcing.lock();
        try {
            if (isStopping(since)) {
                worker.send(new Frame.StopWhenSpeaking());
                Debugger.Found found = debugger.stopUserCode(effort);
                if (found == Debugger.Found.AWAITED_CONNECTION) {
                    worker.send(new Frame.CloseAwaited());
                }
                boolean careful = millisSince(since) < CARE_MILLIS;
                boolean again = careful && found == Debugger.Found.LOCKING;
                Debugger.Effort more = careful ? Debugger.Effort.STOP_AND_FREE : Debugger.Effort.CUT;
                schedule(() -> stopByForce(again ? effort : more, since), again ? AGAIN_SOON_MILLIS : RETRY_MILLIS);
            }
        } finally {
            forcing.unlock();
        }
    }

    private static long millisSince(long nanoTime) {
        return (System.nanoTime() - nanoTime) / 1_000_000;
    }

    private void tellIfStill(long since) {
        if (isStopping(since)) {
            note.accept(CANNOT_STOP);
        }
    }

    private synchronized boolean isStopping(long since) {
        return stopping && stoppingSince == since;
    }

    private void schedule(Runnable task, long millis) {
        try {
            var unused = clock.schedule(task, millis, TimeUnit.MILLISECONDS);
        } catch (RejectedExecutionException closed) {
            LOG.log(Level.DEBUG, "the worker is going anyway");
        }
    }

    @Override
    public void close() {
        clock.shutdownNow();
        debugger.close();
    }
}
