package countwright.kernel.wire;

/**
 * A message with the frames that route it.
 *
 * @param route where it came from or goes to
 * @param message the message itself
 */
public record Envelope(Route route, Message message) {}
