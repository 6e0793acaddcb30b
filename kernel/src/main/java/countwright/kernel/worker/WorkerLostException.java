package countwright.kernel.worker;

/** The worker is gone; its message says in a sentence how, as far as can be known. */
public final class WorkerLostException extends Exception {

    private static final long serialVersionUID = 1L;

    WorkerLostException(String message) {
        super(message);
    }
}
