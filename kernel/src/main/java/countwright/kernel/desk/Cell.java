package countwright.kernel.desk;

import java.util.List;
import java.util.OptionalInt;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.ObjectNode;

/** A cell of a notebook. The JSON parts are carried as they were found and are never changed in place. */
sealed interface Cell {

    /** The tag by which a notebook says that a cell is meant to fail. */
    String RAISES = "raises-exception";

    /** Unique within the notebook; 1 to 64 letters, digits, hyphens and underscores. */
    String id();

    String source();

    ObjectNode metadata();

    /** Text in Markdown, with the pictures it may refer to by file name. */
    record Markdown(String id, String source, ObjectNode metadata, ObjectNode attachments) implements Cell {}

    /** Text that is neither shown nor run. */
    record Raw(String id, String source, ObjectNode metadata, ObjectNode attachments) implements Cell {}

    /** Code, and what came of it when it was last run. */
    record Code(String id, String source, ObjectNode metadata, OptionalInt executionCount, List<Output> outputs)
            implements Cell {

        public Code {
            outputs = List.copyOf(outputs);
        }

        /** Returns this cell as if it had never been run. */
        Code cleared() {
            return new Code(id, source, metadata, OptionalInt.empty(), List.of());
        }

        /** Returns this cell with what came of running it. */
        Code ran(OptionalInt newExecutionCount, List<Output> newOutputs) {
            return new Code(id, source, metadata, newExecutionCount, newOutputs);
        }

        /** Whether the notebook's author expects this cell to fail. */
        boolean mayFail() {
            for (JsonNode tag : metadata.path("tags")) {
                if (tag.isString() && tag.stringValue().equals(RAISES)) {
                    return true;
                }
            }
            return false;
        }

        /** Whether there is nothing to run. */
        boolean isBlank() {
            return source.isBlank();
        }
    }
}
