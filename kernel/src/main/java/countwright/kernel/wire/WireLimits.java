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

    /**
     * Room for a cell with everything pasted into it, and for a client that sends large comm buffers; less where this
     * JVM has little memory.
     */
    public static final WireLimits STANDARD = fitting(Runtime.getRuntime().maxMemory());

    public WireLimits {
        if (frames < 6 || frameBytes < 1024 || messageBytes < frameBytes || jsonDepth < 8) {
            throw new IllegalArgumentException("limits too small to let any request through: " + frames + " frames, "
                    + frameBytes + " bytes a frame, " + messageBytes + " bytes a message, " + jsonDepth
                    + " levels. Use at least 6 frames, 1024 bytes, as many bytes a message as a frame, 8 levels.");
        }
    }

    static WireLimits fitting(long memoryBytes) {
        int frame = (int) Math.max(1 << 20, Math.min(64 << 20, memoryBytes / 16));
        return new WireLimits(256, frame, 4L * frame, 200);
    }

    /** Returns limits for what is always short, such as subscriptions and heartbeats. */
    WireLimits narrowed() {
        int shortFrame = Math.min(frameBytes, 4096);
        return new WireLimits(Math.min(frames, 16), shortFrame, Math.min(messageBytes, 4L * shortFrame), jsonDepth);
    }
}
