package countwright.worker;

/** Thrown into the cell thread from outside to end a cell that does not listen to interrupts. */
final class CellStop extends Error {

    private static final long serialVersionUID = 1L;

    CellStop() {
        super("the cell was stopped", null, false, false);
    }
}
