package countwright.kernel.desk;

import java.util.List;

/** The kernel ended while it ran a cell; carries what the cell had given until then. */
final class KernelLostException extends Exception {

    private final transient RunLog.CellLog cell;
    private final String reason;

    KernelLostException(RunLog.CellLog cell, String lastWords) {
        super("the kernel ended while a cell ran");
        this.cell = cell;
        this.reason = "The kernel ended while this cell ran. " + lastWords;
    }

    RunLog.CellLog cell() {
        return cell;
    }

    /** Returns the loss as the error of the cell. */
    Output.Failed asFailure() {
        return new Output.Failed("KernelLost", reason, List.of(reason));
    }
}
