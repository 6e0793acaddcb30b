package countwright.kernel.service;

import java.time.Duration;
import java.util.concurrent.ExecutorService;

/** One line of requests on the shell channel: that of the kernel itself or of a subshell. */
final class Shell {

    private final CellLane cells;
    private final ExecutorService questions = Background.inOrder("countwright-questions");

    Shell(CellLane cells) {
        this.cells = cells;
    }

    Shell start() {
        cells.start();
        return this;
    }

    /** Returns the lane of its cells. */
    CellLane cells() {
        return cells;
    }

    /** Returns what answers questions about code, one after the other, beside the cells. */
    ExecutorService questions() {
        return questions;
    }

    /** Aborts the cells that wait and takes nothing new; what has begun is answered. */
    void close() {
        questions.shutdown();
        cells.close();
    }

    /** Waits, after {@link #close()}, until what has begun is answered, but no longer than given. */
    void awaitEnd(Duration patience) throws InterruptedException {
        cells.awaitEnd(patience);
        questions.shutdownNow();
    }
}
