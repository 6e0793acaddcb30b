package countwright.kernel.wire;

/** Frames that are no message we accept. The text says why and never quotes contents, so that it can be logged. */
final class MalformedMessageException extends Exception {

    private static final long serialVersionUID = 1L;

    MalformedMessageException(String reason) {
        super(reason);
    }
}
