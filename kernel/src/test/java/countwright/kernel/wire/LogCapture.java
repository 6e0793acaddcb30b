package countwright.kernel.wire;

import java.util.List;
import java.util.concurrent.CopyOnWriteArrayList;
import java.util.logging.Handler;
import java.util.logging.Level;
import java.util.logging.LogRecord;
import java.util.logging.Logger;

/** Keeps what this package writes to the log while a test runs. */
final class LogCapture extends Handler implements AutoCloseable {

    private final List<String> lines = new CopyOnWriteArrayList<>();
    private final Logger logger = Logger.getLogger("countwright.kernel.wire");

    LogCapture() {
        setLevel(Level.ALL);
        logger.addHandler(this);
    }

    List<String> lines() {
        return lines;
    }

    @Override
    public void publish(LogRecord entry) {
        lines.add(entry.getLevel() + " " + entry.getMessage());
    }

    @Override
    public void flush() {
        // Nothing is held back.
    }

    @Override
    public void close() {
        logger.removeHandler(this);
    }
}
