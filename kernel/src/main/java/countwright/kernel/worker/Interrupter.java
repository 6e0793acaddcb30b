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

/**
 * Stops what runs in a worker: first by Thread.interrupt, for code that listens; after a grace by throwing into the cell
 * thread, again and again, for code that catches everything. If that has not helped by the next interrupt, the worker
 * itself is ended, which costs the variables.
 */
final class Interrupter implements AutoCloseable {

    private static final Logger LOG = System.getLogger(Interrupter.class.getName());
    private static final long GRACE_MILLIS = 300;
    private static final long RETRY_MILLIS = 100;

    /** Before this time a second interrupt is taken for impatience, not for a wish to lose the variables. */
    private static final Duration PATIENCE = Duration.ofMillis(1_500);

    private final Worker worker;
    private final Debugger debugger;
    private final ScheduledExecutorService clock;

    /**
     * Held while a stop is under way, so that it cannot reach the next cell. Not this object's monitor: the debugger
     * interface has no timeouts, and an interrupt must be taken while it hangs.
     */
    private final ReentrantLock forcing = new ReentrantLock();

    private boolean running;
    private boolean stopping;
    private long stoppingSince;
    private volatile boolean killed;

    Interrupter(Worker worker, Debugger debugger) {
        this.worker = worker;
        this.debugger = debugger;
        this.clock = Executors.newSingleThreadScheduledExecutor(task -> {
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
        stoppingSince = System.nanoTime();
        worker.send(new Frame.Interrupt());
        schedule(GRACE_MILLIS);
    }

    boolean hasKilled() {
        return killed;
    }

    private void stopByForce() {
        forcing.lock();
        try {
            if (isStopping()) {
                schedule(RETRY_MILLIS);
                var unused = debugger.stopUserCode();
            }
        } finally {
            forcing.unlock();
        }
    }

    private synchronized boolean isStopping() {
        return stopping;
    }

    private void schedule(long millis) {
        try {
            var unused = clock.schedule(this::stopByForce, millis, TimeUnit.MILLISECONDS);
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
