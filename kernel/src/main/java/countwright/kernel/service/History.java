package countwright.kernel.service;

import java.io.IOException;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.Deque;
import java.util.List;
import java.util.Optional;
import java.util.OptionalInt;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.RejectedExecutionException;
import java.util.concurrent.TimeUnit;

/**
 * The cells that were run, of this session and, if there is a file, of those before and beside it. All of it happens on
 * one thread of its own: a slow or broken disk holds up no cell, and a cell is in the history before the next request for
 * it is answered. What cannot be written is still there for this session; that is logged once.
 *
 * <p>Nothing is read or written before the first cell has run or the first request has come.
 */
final class History {

    private static final Logger LOG = System.getLogger(History.class.getName());

    /** The oldest cells of this session go first once there are so many. */
    static final int CAPACITY = 10_000;

    /** Longer results are cut: ten thousand of the longest would be gigabytes. */
    private static final int LONGEST_OUTPUT = 10_000;

    /** A longer cell is not written to the file, where it would push out hundreds of others. */
    private static final int LONGEST_INPUT = 1_000_000;

    private final ExecutorService thread = Background.inOrder("countwright-history");
    private final Optional<HistoryFile> file;

    // Touched on that thread only.
    private final Deque<HistoryEntry> current = new ArrayDeque<>();
    private OptionalInt session = OptionalInt.empty();
    private static final long RETRY_NANOS = 30_000_000_000L;

    private boolean isWritable = true;
    private long failedAt;
    private boolean isReadable = true;

    /** Makes a history that is kept in a file, or else in memory. */
    History(Optional<Path> path) {
        this.file = path.map(HistoryFile::new);
    }

    /** Returns the thread on which requests for the history are to be answered. */
    ExecutorService thread() {
        return thread;
    }

    /** Adds a cell; returns at once. */
    void add(int line, String input, Optional<String> output) {
        try {
            thread.execute(() -> addNow(line, input, output.map(History::cut)));
        } catch (RejectedExecutionException e) {
            LOG.log(Level.DEBUG, "A cell ended after the kernel; it is not in the history.");
        }
    }

    /** Writes what was added and takes nothing more; waits no longer than given. */
    void close(Duration patience) throws InterruptedException {
        thread.shutdown();
        thread.awaitTermination(patience.toMillis(), TimeUnit.MILLISECONDS);
    }

    /** Returns all cells, oldest first; this session comes last, whatever runs beside it. */
    List<HistoryEntry> all() {
        List<HistoryEntry> all = new ArrayList<>(past());
        all.addAll(current);
        return all;
    }

    /**
     * Returns the cells of one session.
     *
     * @param number 0 for this session, a positive number for the session of that number, -1 for the last before this one
     *     in which cells were run, -2 for the one before that, and so on
     */
    List<HistoryEntry> ofSession(int number) {
        if (number == 0 || OptionalInt.of(number).equals(session)) {
            return List.copyOf(current);
        }
        List<HistoryEntry> past = past();
        int wanted = number > 0 ? number : before(past, -(long) number);
        return past.stream().filter(entry -> entry.session() == wanted).toList();
    }

    /** Returns the number of the session so many before this one, or 0, which no session has. */
    private int before(List<HistoryEntry> past, long steps) {
        int[] numbers = past.stream()
                .mapToInt(HistoryEntry::session)
                .filter(each -> each < session.orElse(Integer.MAX_VALUE))
                .distinct()
                .toArray();
        return steps <= numbers.length ? numbers[(int) (numbers.length - steps)] : 0;
    }

    private List<HistoryEntry> past() {
        if (file.isEmpty()) {
            return List.of();
        }
        try {
            return file.get().read().stream()
                    .filter(entry -> session.isEmpty() || entry.session() != session.getAsInt())
                    .sorted(Comparator.comparingInt(HistoryEntry::session).thenComparingInt(HistoryEntry::line))
                    .toList();
        } catch (IOException | RuntimeException e) {
            LOG.log(isReadable ? Level.WARNING : Level.DEBUG, "The history of earlier sessions cannot be read: " + e);
            isReadable = false;
            return List.of();
        }
    }

    private void addNow(int line, String input, Optional<String> output) {
        HistoryEntry entry = new HistoryEntry(thisSession(), line, input, output);
        if (current.size() == CAPACITY) {
            current.removeFirst();
        }
        current.addLast(entry);
        if (file.isPresent() && isTimeToWrite() && input.length() <= LONGEST_INPUT) {
            try {
                file.get().append(entry);
            } catch (IOException | RuntimeException e) {
                giveUpWriting(e);
            }
        }
    }

    private int thisSession() {
        if (session.isEmpty()) {
            session = OptionalInt.of(newSession());
        }
        return session.getAsInt();
    }

    private int newSession() {
        if (file.isPresent()) {
            try {
                return file.get().claimSession();
            } catch (IOException | RuntimeException e) {
                giveUpWriting(e);
            }
        }
        return past().stream().mapToInt(HistoryEntry::session).max().orElse(0) + 1;
    }

    private boolean isTimeToWrite() {
        return isWritable || System.nanoTime() - failedAt > RETRY_NANOS;
    }

    /** A full disk or a kernel that holds the lock may pass; the next try comes after a while. */
    private void giveUpWriting(Exception cause) {
        failedAt = System.nanoTime();
        if (isWritable) {
            isWritable = false;
            LOG.log(
                    Level.WARNING,
                    "The history cannot be written now, so these cells will not be found by later sessions: " + cause
                            + ". Set " + HistoryPlace.VARIABLE + " to a file that can be written, or to off.");
        }
    }

    private static String cut(String output) {
        return output.length() <= LONGEST_OUTPUT ? output : output.substring(0, LONGEST_OUTPUT) + "…";
    }
}
