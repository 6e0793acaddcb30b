package countwright.kernel.desk;

import java.util.List;
import java.util.OptionalInt;
import tools.jackson.databind.node.ObjectNode;

/** One thing a code cell gave. */
sealed interface Output {

    /** Text written to {@code stdout} or {@code stderr}. */
    record Text(String stream, String text) implements Output {}

    /**
     * Something shown in several forms of the same content.
     *
     * @param executionCount present if it is the value of the cell, empty if the cell showed it on the way
     * @param data the forms by media type
     * @param metadata by media type, such as the size at which a picture is meant to be seen
     */
    record Shown(OptionalInt executionCount, ObjectNode data, ObjectNode metadata) implements Output {}

    /** The error that ended the cell. */
    record Failed(String name, String message, List<String> traceback) implements Output {

        public Failed {
            traceback = List.copyOf(traceback);
        }

        /** Returns the lines to show, free of terminal control sequences; the message stands in if there are none. */
        List<String> lines() {
            List<String> lines =
                    TerminalText.plain(String.join("\n", traceback)).lines().toList();
            return lines.isEmpty() ? List.of(message.isEmpty() ? name : name + ": " + message) : lines;
        }
    }
}
