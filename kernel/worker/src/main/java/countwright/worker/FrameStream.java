package countwright.worker;

import java.io.BufferedInputStream;
import java.io.BufferedOutputStream;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;

/**
 * Frames over a pair of byte streams.
 *
 * <p>Our own encoding instead of Java serialisation, because the kernel reads what a process full of user code writes:
 * nothing but these records can come out of it. One thread reads; writing is the caller's to serialise. Nothing is
 * flushed before {@link #flush}. A new frame gets a tag in {@code Tag}, a line in {@code FrameWriter} and one in
 * {@code FrameReader}.
 */
public final class FrameStream {

    /** The longest text or byte field accepted, 256 MiB: beyond it the stream is taken for damaged. */
    static final int MAXIMUM_FIELD = 256 << 20;

    private static final int BUFFER_BYTES = 1 << 16;

    private final DataOutputStream out;
    private final FrameReader reader;
    private final FrameWriter writer;

    public FrameStream(InputStream in, OutputStream out) {
        this.out = new DataOutputStream(new BufferedOutputStream(out, BUFFER_BYTES));
        this.reader = new FrameReader(new DataInputStream(new BufferedInputStream(in, BUFFER_BYTES)));
        this.writer = new FrameWriter(this.out);
    }

    /** Writes a frame without flushing it. */
    public void write(Frame frame) throws IOException {
        writer.write(frame);
    }

    /** Sends everything written so far. */
    public void flush() throws IOException {
        out.flush();
    }

    /**
     * Reads the next frame, waiting for it.
     *
     * @throws java.io.EOFException if the other side has closed the stream
     * @throws IOException if the stream is broken, or carries something that is not a frame
     */
    public Frame read() throws IOException {
        return reader.read();
    }
}
