package countwright.show;

import java.time.Duration;
import java.util.Collection;
import java.util.Iterator;
import java.util.function.LongSupplier;

/**
 * How far a long piece of work has come, shown in one place that is kept up to date.
 *
 * <pre>{@code
 * try (Progress progress = progress("sites", sites.size())) {
 *     for (Site site : sites) {
 *         visit(site);
 *         progress.step();
 *     }
 * }
 * }</pre>
 *
 * <p>It is shown five times a second at most, however often it is told, and once more at the end. Safe for use by
 * several threads.
 */
public final class Progress implements AutoCloseable {

    private static final long NANOS_BETWEEN = 200_000_000L;

    /** Before this an estimate of the time left is a guess. */
    private static final long NANOS_BEFORE_ESTIMATE = 1_000_000_000L;

    private final String label;
    private final long total;
    private final LongSupplier nanoTime;
    private final long began;
    private final Shown shown;
    private long done;
    private long lastShown;
    private boolean closed;

    private Progress(String label, long total, Stage stage, LongSupplier nanoTime) {
        if (total <= 0) {
            throw new IllegalArgumentException(
                    "total must be positive, but for '" + label + "' it is " + total + ". Pass the number of steps.");
        }
        this.label = label;
        this.total = total;
        this.nanoTime = nanoTime;
        this.began = nanoTime.getAsLong();
        this.lastShown = began;
        this.shown = Shown.place(stage, bundle(began));
    }

    static Progress of(String label, long total, Stage stage) {
        return of(label, total, stage, System::nanoTime);
    }

    static Progress of(String label, long total, Stage stage, LongSupplier nanoTime) {
        return new Progress(label, total, stage, nanoTime);
    }

    static <T> Iterator<T> over(String label, Collection<T> items, Stage stage) {
        Iterator<T> each = items.iterator();
        return items.isEmpty() ? each : new Counted<>(each, of(label, items.size(), stage));
    }

    /** Says that one more step is done. */
    public void step() {
        step(1);
    }

    /**
     * Says that more steps are done.
     *
     * @throws IllegalArgumentException if the number is negative
     */
    public synchronized void step(long steps) {
        if (steps < 0) {
            throw new IllegalArgumentException("steps must not be negative, but they are " + steps + ".");
        }
        at(done + steps);
    }

    /**
     * Says how many steps are done in all. More than the total is shown as it is: a count that is off must not stop the
     * work.
     *
     * @throws IllegalArgumentException if the number is negative
     */
    public synchronized void at(long stepsDone) {
        if (stepsDone < 0) {
            throw new IllegalArgumentException("the steps done must not be negative, but they are " + stepsDone + ".");
        }
        done = stepsDone;
        long now = nanoTime.getAsLong();
        if (!closed && now - lastShown >= NANOS_BETWEEN) {
            lastShown = now;
            shown.replaceWith(bundle(now));
        }
    }

    /** Shows the last state and the time taken; steps told later are not shown. */
    @Override
    public synchronized void close() {
        if (!closed) {
            closed = true;
            shown.replaceWith(bundle(nanoTime.getAsLong()));
        }
    }

    @Override
    public synchronized String toString() {
        return text(nanoTime.getAsLong());
    }

    private MimeBundle bundle(long now) {
        String text = text(now);
        long percent = percent();
        // Inline styles only: front ends strip style sheets from outputs they do not trust.
        return MimeBundle.text(text)
                .withHtml(
                        "<div role=\"progressbar\" aria-valuemin=\"0\" aria-valuemax=\"100\" aria-valuenow=\"" + percent
                                + "\" aria-label=\"" + Html.escape(label)
                                + "\" style=\"max-width:32em\"><div style=\"border:1px solid #767676;height:0.6em\">"
                                + "<div style=\"height:100%;width:" + percent + "%;background:#3b78b5\"></div></div>"
                                + "<div style=\"font-size:90%\">" + Html.escape(text) + "</div></div>");
    }

    private String text(long now) {
        return label + ": " + done + " of " + total + " (" + percent() + " %)" + time(now);
    }

    private long percent() {
        return Math.min(100, (long) (100.0 * done / total));
    }

    private String time(long now) {
        long taken = now - began;
        if (closed) {
            return ", " + seconds(taken);
        }
        if (done == 0 || done >= total || taken < NANOS_BEFORE_ESTIMATE) {
            return "";
        }
        return ", about " + seconds((long) ((double) taken / done * (total - done))) + " left";
    }

    private static String seconds(long nanos) {
        Duration time = Duration.ofNanos(nanos + 500_000_000L);
        return time.toMinutes() == 0
                ? time.toSeconds() + " s"
                : time.toMinutes() + " min " + time.toSecondsPart() + " s";
    }

    /** Counts an item as done when the next is asked for. */
    private static final class Counted<T> implements Iterator<T> {

        private final Iterator<T> items;
        private final Progress progress;
        private boolean taken;

        Counted(Iterator<T> items, Progress progress) {
            this.items = items;
            this.progress = progress;
        }

        @Override
        public boolean hasNext() {
            countTaken();
            boolean more = items.hasNext();
            if (!more) {
                progress.close();
            }
            return more;
        }

        @Override
        public T next() {
            countTaken();
            T next = items.next();
            taken = true;
            return next;
        }

        private void countTaken() {
            if (taken) {
                taken = false;
                progress.step();
            }
        }
    }
}
