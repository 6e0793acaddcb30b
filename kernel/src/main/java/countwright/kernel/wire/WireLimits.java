package countwright.kernel.wire;

/**
 * The most that is taken from a peer. What exceeds a limit is ignored, with a line in the log.
 *
 * @param frames frames of one message, routing and buffers included
 * @param frameBytes bytes of one frame; a peer that sends a longer one is disconnected
 * @param messageBytes bytes of all frames of one message
 * @param jsonDepth levels of nesting in header, metadata and content
 */
public record WireLimits(int frames, int frameBytes, long messageBytes, int jsonDepth) {

    /** Room for a cell with everything pasted into it, and for a client that sends large comm buffers. */
    public static final WireLimits STANDARD = new WireLimits(256, 64 << 20, 256L << 20, 200);

    public WireLimits {
        if (frames < 6 || frameBytes < 1024 || messageBytes < frameBytes || jsonDepth < 8) {
            throw new IllegalArgumentException("limits too small to let any request through: " + frames + " frames, "
                    + frameBytes + " bytes a frame, " + messageBytes + " bytes a message, " + jsonDepth
                    + " levels. Use at least 6 frames, 1024 bytes, as many bytes a message as a frame, 8 levels.");
        }
    }
}
