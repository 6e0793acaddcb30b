package countwright.kernel.cell;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.Optional;

/** Receives what a running cell says, in order; called from the engine's own threads and must not block for long. */
public interface CellListener {

    /** Text written to an output stream. */
    void output(Stream stream, String text);

    /** A bundle shown by the cell, replaceable later if it has a display id. */
    void display(MimeBundle bundle, Optional<String> displayId);

    /** A bundle that replaces what was shown under an id. */
    void update(MimeBundle bundle, String displayId);

    /** Removal of what the cell has shown so far. */
    void clear(Stage.Clearing when);

    /** A question to the person at the front end, answered through the request; may be answered on another thread. */
    void ask(InputRequest request);

    /** A bundle for the front end's pager. */
    void page(MimeBundle bundle);

    /** Code for the front end's next cell. */
    void nextInput(String code);

    /** A message for the front end's end of a comm. */
    void comm(CommMessage message);

    /**
     * Asked when the cell begins: whether it is to stop at once, because an interrupt came after it was handed over and
     * before the engine knew of it.
     */
    default boolean isStopRequested() {
        return false;
    }

    /** The two output streams. */
    enum Stream {
        OUT,
        ERR
    }

    /** A question that waits for its answer. */
    interface InputRequest {

        String prompt();

        Stage.Echo echo();

        /** Gives the line the person typed; only the first answer counts. */
        void answer(String line);

        /** Says that no answer will come, and why in one sentence. */
        void refuse(String reason);
    }
}
