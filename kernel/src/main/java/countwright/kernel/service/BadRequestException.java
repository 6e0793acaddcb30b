package countwright.kernel.service;

/** A request whose content is not as the protocol says; the message names request and field. */
final class BadRequestException extends IllegalArgumentException {

    private static final long serialVersionUID = 1L;

    BadRequestException(String message) {
        super(message);
    }
}
