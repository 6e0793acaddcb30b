package countwright.kernel.cell;

import countwright.show.MimeBundle;
import java.time.Duration;
import java.util.Map;

/**
 * One session of cells, run in a worker process that may die and be replaced without the engine dying.
 *
 * <p>{@link #evaluate} is called by one thread at a time; everything else may be called from any thread, also while a
 * cell runs. Positions in code are in UTF-16 units.
 */
public interface CellEngine extends AutoCloseable {

    /**
     * Runs a cell to its end. Never throws for anything the cell does: a failure, an interrupt and the loss of the
     * worker are outcomes.
     *
     * @param executionCount the number the cell is known by in messages and stack traces
     */
    CellOutcome evaluate(String code, int executionCount, CellListener listener);

    /** Evaluates named expressions after a cell; each result or failure stands under its name. */
    Map<String, CellOutcome> evaluateExpressions(Map<String, String> expressions);

    /** Says whether code is a complete cell. */
    Completeness completeness(String code);

    /** Lists what could stand at the cursor. */
    Completions complete(String code, int cursor);

    /** Describes what stands at the cursor; {@code text/plain} is empty where nothing is found. */
    MimeBundle inspect(String code, int cursor, Detail detail);

    /** Asks the running cell, if any, to stop; returns at once. The cell then ends with an interrupted failure. */
    void interrupt();

    /** Ends the worker within the given time. */
    void close(Duration patience);

    /** Ends the worker. */
    @Override
    default void close() {
        close(Duration.ofSeconds(1));
    }

    /** How much {@link #inspect} tells. */
    enum Detail {
        SIGNATURE,
        FULL
    }
}
