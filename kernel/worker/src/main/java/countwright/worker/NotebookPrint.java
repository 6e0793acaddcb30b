package countwright.worker;

import java.io.OutputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;
import org.jspecify.annotations.Nullable;

/**
 * A print stream of the notebook's. Text goes to the outbox at once, without the buffers and locks of the JDK's print
 * stream: a cell stopped while it prints could leave those half written, or, on JDK 21 to 23, locked for all other
 * threads for ever. A line is said as a whole, whichever threads print at the same time.
 *
 * <p>Closing it does nothing: to close a writer around System.out is a common slip, which must not silence later cells.
 */
final class NotebookPrint extends PrintStream {

    private static final String LINE_END = System.lineSeparator();

    private final Outbox outbox;
    private final Frame.Channel channel;

    /** One half of a surrogate pair, printed alone, waits for the other as it would in any encoder; 0 if none does. */
    private char half;

    NotebookPrint(Outbox outbox, Frame.Channel channel) {
        super(OutputStream.nullOutputStream(), false, StandardCharsets.UTF_8);
        this.outbox = outbox;
        this.channel = channel;
    }

    private void say(String text) {
        byte[] bytes = withHalf(text).getBytes(StandardCharsets.UTF_8);
        outbox.putOutput(channel, bytes, 0, bytes.length);
    }

    private synchronized String withHalf(String text) {
        boolean endsInHalf = !text.isEmpty() && Character.isHighSurrogate(text.charAt(text.length() - 1));
        if (half == 0 && !endsInHalf) {
            return text;
        }
        String whole = half == 0 ? text : half + text;
        half = endsInHalf ? text.charAt(text.length() - 1) : 0;
        return endsInHalf ? whole.substring(0, whole.length() - 1) : whole;
    }

    @Override
    public void write(int value) {
        outbox.putOutput(channel, new byte[] {(byte) value}, 0, 1);
    }

    @Override
    public void write(byte[] bytes, int start, int length) {
        outbox.putOutput(channel, bytes, start, length);
    }

    @Override
    public void write(byte[] bytes) {
        outbox.putOutput(channel, bytes, 0, bytes.length);
    }

    @Override
    public void println() {
        say(LINE_END);
    }

    @Override
    public void print(boolean value) {
        say(String.valueOf(value));
    }

    @Override
    public void println(boolean value) {
        say(String.valueOf(value) + LINE_END);
    }

    @Override
    public void print(int value) {
        say(String.valueOf(value));
    }

    @Override
    public void println(int value) {
        say(String.valueOf(value) + LINE_END);
    }

    @Override
    public void print(long value) {
        say(String.valueOf(value));
    }

    @Override
    public void println(long value) {
        say(String.valueOf(value) + LINE_END);
    }

    @Override
    public void print(float value) {
        say(String.valueOf(value));
    }

    @Override
    public void println(float value) {
        say(String.valueOf(value) + LINE_END);
    }

    @Override
    public void print(double value) {
        say(String.valueOf(value));
    }

    @Override
    public void println(double value) {
        say(String.valueOf(value) + LINE_END);
    }

    @Override
    public void print(char value) {
        say(String.valueOf(value));
    }

    @Override
    public void println(char value) {
        say(String.valueOf(value) + LINE_END);
    }

    @Override
    public void print(char[] value) {
        say(String.valueOf(value));
    }

    @Override
    public void println(char[] value) {
        say(String.valueOf(value) + LINE_END);
    }

    @Override
    public void print(@Nullable String value) {
        say(String.valueOf(value));
    }

    @Override
    public void println(@Nullable String value) {
        say(String.valueOf(value) + LINE_END);
    }

    @Override
    public void print(@Nullable Object value) {
        say(String.valueOf(value));
    }

    @Override
    public void println(@Nullable Object value) {
        say(String.valueOf(value) + LINE_END);
    }

    @Override
    public void flush() {
        // Nothing is held back.
    }

    @Override
    public void close() {
        // See above.
    }
}
