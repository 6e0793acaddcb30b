package countwright.kernel.wire;

import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.util.concurrent.TimeUnit;

/**
 * Warnings about what peers send, as many as a person reads: a peer that sends nonsense for hours must not fill the disk.
 * Used by any thread.
 */
final class Complaints {

    private static final Logger LOG = System.getLogger(Complaints.class.getName());
    private static final int MOST = 50;
    private static final long PERIOD_NANOS = TimeUnit.MINUTES.toNanos(1);

    private long periodStart = System.nanoTime();
    private int told;
    private int untold;

    synchronized void tell(String complaint) {
        long now = System.nanoTime();
        if (now - periodStart > PERIOD_NANOS) {
            periodStart = now;
            told = 0;
        }
        if (told == MOST) {
            untold++;
            return;
        }
        told++;
        String more = untold == 0 ? "" : " (and " + untold + " warnings of its kind before, left out)";
        untold = 0;
        LOG.log(Level.WARNING, complaint + more);
    }
}
