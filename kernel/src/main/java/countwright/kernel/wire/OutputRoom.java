package countwright.kernel.wire;

import java.util.concurrent.TimeUnit;

/**
 * Lets those who have output to publish wait while a front end is behind in reading, so that a flood is as fast as its
 * readers and fits into memory. A front end that does not read is let go by its loop, which ends the wait. While an
 * interrupt or the end is under way more is let through, since what was said before must not hold it up. Used by any
 * thread.
 */
final class OutputRoom {

    private static final long USUAL_BYTES = PeerLoop.BEHIND_BYTES;
    private static final long HURRY_BYTES = 10 * USUAL_BYTES;
    private static final long HURRY_NANOS = TimeUnit.SECONDS.toNanos(2);

    private long underWay;
    private long behind;
    private boolean hurried;
    private long hurriedAt;
    private boolean holding = true;

    /** Waits for room; an interrupted thread does not wait, and stays interrupted. */
    synchronized void await() {
        try {
            while (holding && underWay + behind > limit()) {
                wait(100);
            }
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
    }

    /** Counts what is handed to the loop. */
    synchronized void add(long bytes) {
        underWay += bytes;
    }

    /** Counts what the loop has handed to its peers. */
    synchronized void remove(long bytes) {
        underWay -= bytes;
        notifyAll();
    }

    /** Says how many bytes the slowest reader has still to take. */
    synchronized void behind(long bytes) {
        if (behind != bytes) {
            behind = bytes;
            notifyAll();
        }
    }

    /** Lets more through for a moment. */
    synchronized void hurry() {
        hurried = true;
        hurriedAt = System.nanoTime();
        notifyAll();
    }

    /** Lets everything through from now on. */
    synchronized void open() {
        holding = false;
        notifyAll();
    }

    private long limit() {
        return hurried && System.nanoTime() - hurriedAt < HURRY_NANOS ? HURRY_BYTES : USUAL_BYTES;
    }
}
