package countwright.worker;

import countwright.show.Stage;
import java.io.InputStream;
import java.io.OutputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;

/** Makes System.out, System.err and System.in those of the notebook. */
final class StandardStreams {

    private StandardStreams() {}

    static void redirect(Outbox outbox, Stage stage) {
        System.setOut(printing(outbox, Frame.Channel.OUT));
        System.setErr(printing(outbox, Frame.Channel.ERR));
        System.setIn(new AskingInput(stage));
    }

    private static PrintStream printing(Outbox outbox, Frame.Channel channel) {
        return new KeptOpen(new OutboxOutput(outbox, channel));
    }

    /** Closing a writer around System.out is a common slip, which must not silence all later cells. */
    private static final class KeptOpen extends PrintStream {

        KeptOpen(OutputStream out) {
            super(out, false, StandardCharsets.UTF_8);
        }

        @Override
        public void close() {
            flush();
        }
    }

    private static final class OutboxOutput extends OutputStream {

        private final Outbox outbox;
        private final Frame.Channel channel;

        OutboxOutput(Outbox outbox, Frame.Channel channel) {
            this.outbox = outbox;
            this.channel = channel;
        }

        @Override
        public void write(int value) {
            write(new byte[] {(byte) value}, 0, 1);
        }

        @Override
        public void write(byte[] bytes, int start, int length) {
            outbox.putOutput(channel, bytes, start, length);
        }
    }

    /** Asks the front end for a line whenever one is read and none is left. */
    private static final class AskingInput extends InputStream {

        private final Stage stage;
        private byte[] line = {};
        private int next;

        AskingInput(Stage stage) {
            this.stage = stage;
        }

        @Override
        public synchronized int read() {
            fill();
            return line[next++] & 0xff;
        }

        @Override
        public synchronized int read(byte[] target, int start, int length) {
            if (length == 0) {
                return 0;
            }
            fill();
            int count = Math.min(length, line.length - next);
            System.arraycopy(line, next, target, start, count);
            next += count;
            return count;
        }

        @Override
        public synchronized int available() {
            return line.length - next;
        }

        private void fill() {
            if (next < line.length) {
                return;
            }
            // Refused, this throws an unchecked exception that says why. Scanner swallows checked ones and then only
            // says
            // that there is no line.
            line = (stage.ask("", Stage.Echo.VISIBLE) + "\n").getBytes(StandardCharsets.UTF_8);
            next = 0;
        }
    }
}
