package countwright.kernel.wire;

/** Receives messages; called by the thread that owns the channel's socket, so it must hand long work on. */
@FunctionalInterface
public interface Deliveries {

    /** Takes a message whose signature has been checked. */
    void deliver(Channel channel, Envelope envelope);
}
