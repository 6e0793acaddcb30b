package countwright.show;

import java.util.Map;
import java.util.concurrent.atomic.AtomicBoolean;
import java.util.function.Consumer;

/**
 * One end of a line between this session and something in the front end, such as a widget.
 *
 * <p>What is sent and received are JSON objects as maps. Received values are {@code String}, {@code Long},
 * {@code Double}, {@code Boolean}, {@code List} and {@code Map}; the null of JSON is {@code Optional.empty()}. All of it
 * is immutable. What is sent may also use other whole and decimal numbers, and null or an empty {@code Optional} for the
 * null of JSON; anything else is refused with the place where it stands.
 *
 * <p>Handlers run one after the other, on a thread of their own, so messages are answered while a cell runs. What they
 * print or show stands with the message. An exception in one is reported there and ends nothing but the handler.
 */
public final class Comm {

    private final String id;
    private final String target;
    private final Map<String, Object> openingData;
    private final AtomicBoolean open = new AtomicBoolean(true);
    private volatile Consumer<Map<String, Object>> messageHandler = data -> {};
    private volatile Consumer<Map<String, Object>> closeHandler = data -> {};

    Comm(String id, String target, Map<String, Object> openingData) {
        this.id = id;
        this.target = target;
        this.openingData = openingData;
    }

    /** Returns the id, the same at both ends. */
    public String id() {
        return id;
    }

    /** Returns what this comm is for. */
    public String target() {
        return target;
    }

    /** Returns what was sent with the opening. */
    public Map<String, Object> openingData() {
        return openingData;
    }

    /** Returns whether neither end has closed it. */
    public boolean isOpen() {
        return open.get();
    }

    /** Says what to do with each message from the other end, in place of what was said before. Returns this comm. */
    public Comm onMessage(Consumer<Map<String, Object>> handler) {
        messageHandler = handler;
        return this;
    }

    /** Says what to do when the other end closes, in place of what was said before. Returns this comm. */
    public Comm onClose(Consumer<Map<String, Object>> handler) {
        closeHandler = handler;
        return this;
    }

    /**
     * Sends a message to the other end.
     *
     * @throws IllegalStateException if this comm is closed
     * @throws IllegalArgumentException if the data holds something that JSON does not have
     */
    public void send(Map<String, ?> data) {
        if (!isOpen()) {
            throw new IllegalStateException(
                    "the comm for '" + target + "' is closed, so nothing can be sent. Open another with Comms.open.");
        }
        Show.stage().send(new CommMessage(CommMessage.Kind.MESSAGE, id, "", CommData.copyOf(data)));
    }

    /** Closes both ends; does nothing if it is closed. */
    public void close() {
        close(Map.of());
    }

    /** Closes both ends, with a last message; does nothing if it is closed. */
    public void close(Map<String, ?> data) {
        CommMessage last = new CommMessage(CommMessage.Kind.CLOSE, id, "", CommData.copyOf(data));
        if (open.compareAndSet(true, false)) {
            Comms.forget(this);
            Show.stage().send(last);
        }
    }

    void received(Map<String, Object> data) {
        messageHandler.accept(data);
    }

    void closedByOtherEnd(Map<String, Object> data) {
        if (open.compareAndSet(true, false)) {
            closeHandler.accept(data);
        }
    }

    @Override
    public String toString() {
        return "comm for '" + target + "', " + (isOpen() ? "open" : "closed");
    }
}
