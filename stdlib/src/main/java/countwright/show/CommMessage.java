package countwright.show;

import java.util.Map;

/**
 * One message between the two ends of a comm, as a {@link Stage} carries it.
 *
 * @param commId the comm's id, the same at both ends
 * @param target what the comm is for, when it is opened; empty in the other messages
 * @param data JSON values as {@link Comm} describes them; checked and copied
 */
public record CommMessage(Kind kind, String commId, String target, Map<String, Object> data) {

    /** What a message says. */
    public enum Kind {
        /** The other end is there now. */
        OPEN,
        /** Something for the other end. */
        MESSAGE,
        /** The other end is gone. */
        CLOSE
    }

    public CommMessage {
        data = CommData.copyOf(data);
    }
}
