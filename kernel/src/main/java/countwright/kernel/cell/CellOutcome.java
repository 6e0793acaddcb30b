package countwright.kernel.cell;

import countwright.show.MimeBundle;
import java.util.List;
import java.util.Optional;

/** How a cell ended. */
public sealed interface CellOutcome {

    /** The cell ran to its end; there is a result if its last statement was an expression with a value. */
    record Success(Optional<MimeBundle> result) implements CellOutcome {}

    /**
     * The cell was stopped by an error, an interrupt or the loss of its worker.
     *
     * @param name the kind of error, such as an exception's simple name or "CompileError"
     * @param message one line that says what was wrong
     * @param traceback lines to show, in the order to show them, message included; never empty
     */
    record Failure(String name, String message, List<String> traceback) implements CellOutcome {
        public Failure {
            traceback = List.copyOf(traceback);
        }
    }
}
