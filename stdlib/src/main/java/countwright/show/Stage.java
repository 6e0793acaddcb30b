package countwright.show;

/**
 * The host behind a session: where shown things go and where answers come from.
 *
 * <p>The worker of the kernel installs one that talks to the notebook; without a host, a plain terminal stands in.
 */
public interface Stage {

    /** Shows a bundle below the running cell. */
    void display(MimeBundle bundle);

    /** Shows a bundle that can be replaced later through {@link #update}, under an id unique in the session. */
    void display(MimeBundle bundle, String displayId);

    /** Replaces what was shown under an id, wherever it stands. */
    void update(MimeBundle bundle, String displayId);

    /** Removes what the running cell has shown so far. */
    void clear(Clearing when);

    /**
     * Asks the person at the front end for a line of text and waits for it.
     *
     * @throws IllegalStateException if the front end takes no input
     */
    String ask(String prompt, Echo echo);

    /**
     * Has the cells of a lost session run again, once the statement that asked has ended.
     *
     * @throws IllegalStateException if this host does not keep cells
     */
    default void restoreSession() {
        throw new IllegalStateException("there is no session to restore: this is not a notebook.");
    }

    /** Returns how many cells {@link #restoreSession} would run again. */
    default int restorableCells() {
        return 0;
    }
    /** Shows a bundle in the front end's pager, beside the cells, once the running cell has ended well. */
    void page(MimeBundle bundle);

    /** Puts code into the front end's next cell, once the running cell has ended well. */
    void nextInput(String code);

    /**
     * Sends a message to the front end's end of a comm.
     *
     * @throws IllegalStateException if there is no front end
     */
    void send(CommMessage message);

    /** When shown things are removed. */
    enum Clearing {
        /** At once. */
        NOW,
        /** When the next thing is shown, so that replacing does not flicker. */
        BEFORE_NEXT
    }

    /** Whether what the person types can be seen. */
    enum Echo {
        VISIBLE,
        HIDDEN
    }
}
