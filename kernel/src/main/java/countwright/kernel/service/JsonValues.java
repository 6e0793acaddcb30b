package countwright.kernel.service;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/** JSON as plain values and back; its null is an empty Optional. */
final class JsonValues {

    private static final JsonNodeFactory NODES = JsonNodeFactory.instance;

    private JsonValues() {}

    static Map<String, Object> of(ObjectNode object) {
        Map<String, Object> values = new LinkedHashMap<>();
        object.properties().forEach(entry -> values.put(entry.getKey(), of(entry.getValue())));
        return values;
    }

    private static Object of(JsonNode node) {
        if (node instanceof ObjectNode object) {
            return of(object);
        }
        if (node.isArray()) {
            List<Object> items = new ArrayList<>();
            node.forEach(item -> items.add(of(item)));
            return items;
        }
        if (node.isString()) {
            return node.stringValue();
        }
        if (node.isBoolean()) {
            return node.booleanValue();
        }
        if (node.isIntegralNumber() && node.canConvertToLong()) {
            return node.longValue();
        }
        return node.isNumber() ? (Object) node.numberValue().doubleValue() : Optional.empty();
    }

    static ObjectNode toJson(Map<?, ?> values) {
        ObjectNode object = NODES.objectNode();
        values.forEach((key, value) -> object.set(key.toString(), node(value)));
        return object;
    }

    private static JsonNode node(Object value) {
        if (value instanceof Map<?, ?> values) {
            return toJson(values);
        }
        if (value instanceof List<?> items) {
            ArrayNode array = NODES.arrayNode();
            items.forEach(item -> array.add(node(item)));
            return array;
        }
        if (value instanceof Long number) {
            return NODES.numberNode(number);
        }
        if (value instanceof Double number) {
            return NODES.numberNode(number);
        }
        if (value instanceof Boolean flag) {
            return NODES.booleanNode(flag);
        }
        return value instanceof String text ? NODES.stringNode(text) : NODES.nullNode();
    }
}
