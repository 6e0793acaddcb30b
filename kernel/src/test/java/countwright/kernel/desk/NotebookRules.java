package countwright.kernel.desk;

import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;

/**
 * The rules of the notebook format 4.5, as its published JSON schema states them: which keys must be there, which may,
 * and of what kind. Each broken rule is a line that names the place.
 */
final class NotebookRules {

    private final List<String> broken = new ArrayList<>();

    private NotebookRules() {}

    static List<String> brokenBy(String json) {
        NotebookRules rules = new NotebookRules();
        rules.root(JsonMapper.shared().readTree(json));
        return rules.broken;
    }

    private void root(JsonNode root) {
        keys("notebook", root, Set.of("metadata", "nbformat", "nbformat_minor", "cells"), Set.of());
        rule(root.path("nbformat").intValue(0) == 4, "nbformat is 4");
        rule(root.path("nbformat_minor").intValue(0) >= 5, "nbformat_minor is at least 5");
        JsonNode metadata = root.path("metadata");
        rule(metadata.isObject(), "metadata is an object");
        if (metadata.has("kernelspec")) {
            rule(metadata.path("kernelspec").path("name").isString(), "kernelspec has a name");
            rule(metadata.path("kernelspec").path("display_name").isString(), "kernelspec has a display_name");
        }
        if (metadata.has("language_info")) {
            rule(metadata.path("language_info").path("name").isString(), "language_info has a name");
        }
        Set<String> ids = new HashSet<>();
        root.path("cells").forEach(cell -> {
            cell(cell);
            rule(ids.add(cell.path("id").asString("")), "ids differ: " + cell.path("id"));
        });
    }

    private void cell(JsonNode cell) {
        String type = cell.path("cell_type").asString("");
        rule(Set.of("code", "markdown", "raw").contains(type), "cell_type is known: " + type);
        if (type.equals("code")) {
            keys("code", cell, Set.of("id", "cell_type", "metadata", "source", "outputs", "execution_count"), Set.of());
            count(cell);
            cell.path("outputs").forEach(this::output);
        } else {
            keys(type, cell, Set.of("id", "cell_type", "metadata", "source"), Set.of("attachments"));
        }
        rule(cell.path("id").asString("").matches("[a-zA-Z0-9_-]{1,64}"), "id is well formed: " + cell.path("id"));
        rule(cell.path("metadata").isObject(), "cell metadata is an object");
        text("source", cell.path("source"));
    }

    private void output(JsonNode output) {
        switch (output.path("output_type").asString("")) {
            case "stream" -> {
                keys("stream", output, Set.of("output_type", "name", "text"), Set.of());
                text("text", output.path("text"));
            }
            case "display_data" -> bundle(output, Set.of("output_type", "data", "metadata"));
            case "execute_result" -> {
                bundle(output, Set.of("output_type", "data", "metadata", "execution_count"));
                count(output);
            }
            case "error" -> {
                keys("error", output, Set.of("output_type", "ename", "evalue", "traceback"), Set.of());
                rule(output.path("ename").isString() && output.path("evalue").isString(), "error has texts");
                output.path("traceback").forEach(line -> rule(line.isString(), "traceback is lines"));
            }
            default -> rule(false, "output_type is known: " + output);
        }
    }

    private void bundle(JsonNode output, Set<String> required) {
        keys("bundle", output, required, Set.of());
        output.path("data").forEachEntry((type, form) -> {
            if (!type.equals("application/json") && !type.endsWith("+json")) {
                text(type, form);
            }
        });
    }

    private void count(JsonNode holder) {
        JsonNode count = holder.path("execution_count");
        rule(
                count.isNull() || (count.isIntegralNumber() && count.intValue() >= 0),
                "execution_count is a count or null");
    }

    private void text(String what, JsonNode text) {
        rule(text.isString() || text.isArray(), what + " is text or lines");
        if (text.isArray()) {
            text.forEach(line -> rule(line.isString(), what + " is made of lines"));
        }
    }

    private void keys(String what, JsonNode object, Set<String> required, Set<String> optional) {
        required.forEach(key -> rule(object.has(key), what + " has " + key));
        object.propertyNames()
                .forEach(key -> rule(
                        required.contains(key) || optional.contains(key),
                        what + " has nothing but known keys: " + key));
    }

    private void rule(boolean holds, String rule) {
        if (!holds) {
            broken.add("broken: " + rule);
        }
    }
}
