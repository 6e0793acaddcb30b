package countwright.kernel.cell;

import countwright.show.CommMessage;
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

    /**
     * Passes a message from the front end's end of a comm to its handler, which runs beside the cells, one message after
     * the other. Returns once the message is on its way.
     *
     * @param listener hears what the handler says
     * @param handled run once when the handler has ended, or when it is sure that none will run
     */
    void receive(CommMessage message, CellListener listener, Runnable handled);

    /** Has an action run whenever the worker is lost, and with it what cells declared and all comms. */
    void whenWorkerIsLost(Runnable action);

    /**
     * Asks the running cell to stop, or else the comm handler that runs, if one does; returns at once. The cell then
     * ends with an interrupted failure.
     */
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
