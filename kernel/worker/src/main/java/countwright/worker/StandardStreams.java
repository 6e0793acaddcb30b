package countwright.worker;

import countwright.show.Stage;
import java.io.InputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;

/** System.out, System.err and System.in as those of the notebook. */
final class StandardStreams {

    private final PrintStream out;
    private final PrintStream err;
    private final InputStream in;

    StandardStreams(Outbox outbox, Stage stage) {
        this.out = new NotebookPrint(outbox, Frame.Channel.OUT);
        this.err = new NotebookPrint(outbox, Frame.Channel.ERR);
        this.in = new AskingInput(stage);
    }

    /** Puts them in place, or back there where a cell has put others. */
    void putInPlace() {
        if (System.out != out) {
            System.setOut(out);
        }
        if (System.err != err) {
            System.setErr(err);
        }
        if (System.in != in) {
            System.setIn(in);
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
