package countwright.show;

/**
 * The session that cells run in. Its variables live in a worker process; when that is lost, as by {@code System.exit} or
 * for lack of memory, a fresh one takes its place, and the cells that had succeeded can be run again.
 */
public final class Session {

    private Session() {}

    /**
     * Runs the cells again that had succeeded in the lost session, in the order in which they ran, stopping at the first
     * that fails. It begins when the statement that calls this has ended, and is over before the next one of the cell.
     *
     * <p>What the cells print and show is not shown again. A cell that has been run again by hand since the loss is left
     * out. After a failure, another call goes on with the cell that failed. Where nothing was lost, nothing is done but to
     * say so.
     *
     * @throws IllegalStateException outside a notebook
     */
    public static void restore() {
        Show.stage().restoreSession();
    }

    /** Returns how many cells {@link #restore} would run again, as it was when the running cell began. */
    public static int restorableCells() {
        return Show.stage().restorableCells();
    }
}
