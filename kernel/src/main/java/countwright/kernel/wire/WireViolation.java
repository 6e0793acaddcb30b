package countwright.kernel.wire;

/** What a peer did that ends its connection. The text completes "disconnected a peer: ..." and quotes nothing. */
final class WireViolation extends Exception {

    private static final long serialVersionUID = 1L;

    WireViolation(String reason) {
        super(reason);
    }
}
