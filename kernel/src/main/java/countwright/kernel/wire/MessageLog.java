package countwright.kernel.wire;

import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.util.Arrays;
import java.util.Optional;

/** Writes whole messages to the log, for those who debug a front end; only if the environment asks for it. */
final class MessageLog {

    /** Its value {@code messages} asks for the contents of messages in the log. */
    static final String VARIABLE = "COUNTWRIGHT_LOG";

    private static final Logger LOG = System.getLogger(MessageLog.class.getName());
    private static final int LONGEST = 10_000;

    private final boolean asked;

    /** Reads the value of {@link #VARIABLE}: words between commas. */
    MessageLog(Optional<String> value) {
        this.asked = value.stream()
                .flatMap(words -> Arrays.stream(words.split(",", -1)))
                .anyMatch(word -> word.strip().equals("messages"));
    }

    static MessageLog ofEnvironment() {
        return new MessageLog(Optional.ofNullable(System.getenv(VARIABLE)));
    }

    void received(Channel channel, Message message) {
        tell("received on ", channel, message);
    }

    void sent(Channel channel, Message message) {
        tell("sent on ", channel, message);
    }

    private void tell(String what, Channel channel, Message message) {
        if (asked) {
            String content = message.content().toString();
            LOG.log(
                    Level.INFO,
                    what + channel.protocolName() + ": " + message + " "
                            + (content.length() <= LONGEST ? content : content.substring(0, LONGEST) + "…"));
        }
    }
}
