package countwright.kernel.desk;

import countwright.kernel.wire.Message;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalInt;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * What the cells of a run have given so far, gathered from the messages on iopub. A message belongs to the cell whose
 * request caused it, also when it comes late; an update of a shown thing reaches every place where it stands.
 */
final class RunLog {

    private final Map<String, CellLog> byRequest = new HashMap<>();

    /** Opens the log of one cell. */
    CellLog open(String requestId) {
        CellLog log = new CellLog();
        byRequest.put(requestId, log);
        return log;
    }

    /** Takes a message of any type; one that says nothing about a cell's output is passed over. */
    void take(Message message) {
        if (message.type().equals("update_display_data")) {
            update(message.content());
            return;
        }
        message.parent().map(parent -> byRequest.get(parent.id())).ifPresent(log -> log.take(message));
    }

    private void update(ObjectNode content) {
        Optional<String> id = displayId(content);
        Output.Shown renewed = shown(OptionalInt.empty(), content);
        id.ifPresent(wanted -> byRequest.values().forEach(log -> log.update(wanted, renewed)));
    }

    /** The outputs of one cell, in order. */
    static final class CellLog {

        private record Entry(Output output, Optional<String> displayId) {}

        private final List<Entry> entries = new ArrayList<>();
        private OptionalInt executionCount = OptionalInt.empty();
        private boolean clearBeforeNext;

        OptionalInt executionCount() {
            return executionCount;
        }

        List<Output> outputs() {
            return entries.stream().map(Entry::output).toList();
        }

        /** Returns the error that ended the cell, if one did. */
        Optional<Output.Failed> failure() {
            return entries.stream()
                    .map(Entry::output)
                    .filter(Output.Failed.class::isInstance)
                    .map(Output.Failed.class::cast)
                    .findFirst();
        }

        /** Adds an error known from elsewhere than iopub. */
        void fail(Output.Failed failed) {
            add(failed, Optional.empty());
        }

        void expect(OptionalInt count) {
            if (executionCount.isEmpty()) {
                executionCount = count;
            }
        }

        private void take(Message message) {
            ObjectNode content = message.content();
            switch (message.type()) {
                case "execute_input" -> executionCount = count(content);
                case "stream" ->
                    stream(
                            content.path("name").asString("stdout"),
                            content.path("text").asString(""));
                case "display_data" -> add(shown(OptionalInt.empty(), content), displayId(content));
                case "execute_result" -> add(shown(count(content), content), displayId(content));
                case "error" -> add(failed(content), Optional.empty());
                case "clear_output" -> clear(content.path("wait").asBoolean(false));
                default -> {
                    // Status and the like; later versions of the protocol may add more.
                }
            }
        }

        private void stream(String name, String text) {
            if (!clearBeforeNext
                    && !entries.isEmpty()
                    && entries.get(entries.size() - 1).output() instanceof Output.Text last
                    && last.stream().equals(name)) {
                entries.set(entries.size() - 1, new Entry(new Output.Text(name, last.text() + text), Optional.empty()));
            } else {
                add(new Output.Text(name, text), Optional.empty());
            }
        }

        private void add(Output output, Optional<String> displayId) {
            if (clearBeforeNext) {
                entries.clear();
                clearBeforeNext = false;
            }
            entries.add(new Entry(output, displayId));
        }

        private void clear(boolean beforeNext) {
            if (beforeNext) {
                clearBeforeNext = true;
            } else {
                entries.clear();
            }
        }

        private void update(String displayId, Output.Shown renewed) {
            entries.replaceAll(entry -> {
                if (entry.displayId().filter(displayId::equals).isEmpty()
                        || !(entry.output() instanceof Output.Shown old)) {
                    return entry;
                }
                return new Entry(
                        new Output.Shown(old.executionCount(), renewed.data(), renewed.metadata()), entry.displayId());
            });
        }
    }

    static Output.Failed failed(JsonNode content) {
        List<String> traceback = new ArrayList<>();
        content.path("traceback").forEach(line -> traceback.add(line.asString("")));
        return new Output.Failed(
                content.path("ename").asString("Error"), content.path("evalue").asString(""), traceback);
    }

    private static Output.Shown shown(OptionalInt count, ObjectNode content) {
        return new Output.Shown(count, object(content.path("data")), object(content.path("metadata")));
    }

    private static Optional<String> displayId(ObjectNode content) {
        JsonNode id = content.path("transient").path("display_id");
        return id.isString() ? Optional.of(id.stringValue()) : Optional.empty();
    }

    private static OptionalInt count(JsonNode content) {
        JsonNode count = content.path("execution_count");
        return count.isIntegralNumber() ? OptionalInt.of(count.intValue()) : OptionalInt.empty();
    }

    private static ObjectNode object(JsonNode stored) {
        return stored instanceof ObjectNode object ? object : JsonNodeFactory.instance.objectNode();
    }
}
