package countwright.kernel.service;

import java.util.LinkedHashMap;
import java.util.Locale;
import java.util.Map;
import java.util.OptionalInt;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/** The content of a request, read field by field; a missing or null field gives its default, a wrong one is refused. */
final class Content {

    private final String type;
    private final ObjectNode fields;

    Content(String type, ObjectNode fields) {
        this.type = type;
        this.fields = fields;
    }

    String text(String field) {
        JsonNode value = fields.path(field);
        if (!value.isString()) {
            throw wrong(field, "text", value);
        }
        return value.stringValue();
    }

    String text(String field, String absent) {
        return isAbsent(field) ? absent : text(field);
    }

    boolean flag(String field, boolean absent) {
        JsonNode value = fields.path(field);
        if (isAbsent(field)) {
            return absent;
        }
        if (!value.isBoolean()) {
            throw wrong(field, "true or false", value);
        }
        return value.booleanValue();
    }

    OptionalInt integer(String field) {
        JsonNode value = fields.path(field);
        if (isAbsent(field)) {
            return OptionalInt.empty();
        }
        if (!value.isIntegralNumber() || !value.canConvertToInt()) {
            throw wrong(field, "an integer", value);
        }
        return OptionalInt.of(value.intValue());
    }

    /** Returns an object of texts, in its order. */
    Map<String, String> texts(String field) {
        JsonNode value = fields.path(field);
        Map<String, String> texts = new LinkedHashMap<>();
        if (isAbsent(field)) {
            return texts;
        }
        if (!value.isObject()) {
            throw wrong(field, "an object of texts", value);
        }
        value.properties().forEach(entry -> {
            if (!entry.getValue().isString()) {
                throw wrong(field + "." + entry.getKey(), "text", entry.getValue());
            }
            texts.put(entry.getKey(), entry.getValue().stringValue());
        });
        return texts;
    }

    /** Returns an object; an empty one if it is absent. */
    ObjectNode object(String field) {
        JsonNode value = fields.path(field);
        if (isAbsent(field)) {
            return JsonNodeFactory.instance.objectNode();
        }
        if (value instanceof ObjectNode object) {
            return object;
        }
        throw wrong(field, "an object", value);
    }

    BadRequestException wrong(String field, String wanted, JsonNode found) {
        String what = found.isMissingNode()
                ? "it is missing"
                : "it is of type " + found.getNodeType().name().toLowerCase(Locale.ROOT);
        return new BadRequestException(type + " needs " + wanted + " in content." + field + ", but " + what
                + ". The front end should be corrected.");
    }

    private boolean isAbsent(String field) {
        return fields.path(field).isMissingNode() || fields.path(field).isNull();
    }
}
