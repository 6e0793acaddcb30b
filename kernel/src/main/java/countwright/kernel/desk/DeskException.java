package countwright.kernel.desk;

/**
 * Something outside the notebook's own code that kept the desk from doing its work: a file that cannot be read, a kernel
 * that does not start. The message is written for the person at the terminal: what was wrong, where, what to do.
 */
public final class DeskException extends RuntimeException {

    public DeskException(String message) {
        super(message);
    }

    public DeskException(String message, Throwable cause) {
        super(message, cause);
    }
}
