package countwright.kernel.wire;

import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/**
 * Cuts the bytes of one connection into messages and commands. Memory is taken as bytes arrive, never on the word of a
 * header. A message of too many frames or bytes is skipped to its end; a frame that is too long ends the connection.
 */
final class FrameDecoder {

    private static final int FIRST_PIECE = 16 << 10;
    private static final int LONGEST_COMMAND = 4 << 10;
    private static final byte[] NOTHING = {};

    private final WireLimits limits;
    private final Receiver receiver;
    /** A message of so many times too many frames is not waited for to end. */
    private static final int MOST_TIMES = 1_000;

    private final byte[] header = new byte[9];
    private int headerLength;
    private boolean inBody;
    private int frameLength;
    private byte[] body = NOTHING;
    private int filled;
    private List<byte[]> frames = new ArrayList<>();
    private int frameCount;
    private long messageBytes;
    private long keptBytes;

    /** Takes what has been cut out. */
    interface Receiver {
        void message(List<byte[]> frames) throws WireViolation;

        void command(byte[] body) throws WireViolation;

        /** A message was skipped; the reason quotes nothing. */
        void skipped(String reason);
    }

    FrameDecoder(WireLimits limits, Receiver receiver) {
        this.limits = limits;
        this.receiver = receiver;
    }

    /** Returns the bytes held for a message that is not complete yet. */
    long held() {
        return keptBytes + body.length;
    }

    void feed(ByteBuffer in) throws WireViolation {
        while (in.hasRemaining()) {
            if (inBody) {
                takeBody(in);
            } else {
                header[headerLength] = in.get();
                headerLength++;
                if (headerLength > 1 && headerLength == 1 + lengthBytes()) {
                    beginFrame();
                }
            }
            if (inBody && filled == frameLength) {
                endFrame();
            }
        }
    }

    private int lengthBytes() {
        return (header[0] & Zmtp.LONG) == 0 ? 1 : Long.BYTES;
    }

    private boolean isCommand() {
        return (header[0] & Zmtp.COMMAND) != 0;
    }

    private boolean isSkipping() {
        return frameCount > limits.frames() || messageBytes > limits.messageBytes();
    }

    private void beginFrame() throws WireViolation {
        int flags = header[0];
        if ((flags & ~(Zmtp.MORE | Zmtp.LONG | Zmtp.COMMAND)) != 0 || (isCommand() && (flags & Zmtp.MORE) != 0)) {
            throw new WireViolation("it sent bytes that are no frame");
        }
        long length = lengthBytes() == 1
                ? header[1] & 0xff
                : ByteBuffer.wrap(header, 1, Long.BYTES).getLong();
        int longest = isCommand() ? LONGEST_COMMAND : limits.frameBytes();
        if (length < 0 || length > longest) {
            throw new WireViolation("it sent a frame longer than " + longest + " bytes");
        }
        frameLength = (int) length;
        filled = 0;
        inBody = true;
        if (!isCommand()) {
            frameCount++;
            if (frameCount > MOST_TIMES * limits.frames()) {
                throw new WireViolation("it sent a message of more frames than can be skipped");
            }
            messageBytes += length;
            if (isSkipping()) {
                frames = new ArrayList<>();
                keptBytes = 0;
            }
        }
        body = isCommand() || !isSkipping() ? new byte[Math.min(frameLength, FIRST_PIECE)] : NOTHING;
    }

    private void takeBody(ByteBuffer in) {
        int count = Math.min(in.remaining(), frameLength - filled);
        if (!isCommand() && isSkipping()) {
            in.position(in.position() + count);
        } else {
            if (filled + count > body.length) {
                body = Arrays.copyOf(body, (int) Math.min(frameLength, Math.max(filled + count, 2L * body.length)));
            }
            in.get(body, filled, count);
        }
        filled += count;
    }

    private void endFrame() throws WireViolation {
        byte[] frame = body;
        body = NOTHING;
        inBody = false;
        headerLength = 0;
        if (isCommand()) {
            receiver.command(frame);
            return;
        }
        if (!isSkipping()) {
            frames.add(frame);
            keptBytes += frame.length;
        }
        if ((header[0] & Zmtp.MORE) == 0) {
            endMessage();
        }
    }

    private void endMessage() throws WireViolation {
        List<byte[]> complete = frames;
        boolean skipped = isSkipping();
        int count = frameCount;
        long bytes = messageBytes;
        frames = new ArrayList<>();
        frameCount = 0;
        messageBytes = 0;
        keptBytes = 0;
        if (skipped) {
            receiver.skipped(count + " frames of " + bytes + " bytes are too many");
        } else {
            receiver.message(complete);
        }
    }
}
