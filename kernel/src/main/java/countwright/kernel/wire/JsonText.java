package countwright.kernel.wire;

import java.io.StringWriter;
import java.math.BigDecimal;
import java.util.Map;
import tools.jackson.core.JacksonException;
import tools.jackson.core.JsonGenerator;
import tools.jackson.core.JsonParser;
import tools.jackson.core.JsonToken;
import tools.jackson.core.ObjectReadContext;
import tools.jackson.core.ObjectWriteContext;
import tools.jackson.core.StreamReadConstraints;
import tools.jackson.core.exc.StreamReadException;
import tools.jackson.core.json.JsonFactory;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * JSON as trees: reading and writing, over Jackson's parser and generator. Jackson's own mapper does the same, but to set it
 * up takes a third of the kernel's start. Used by any thread.
 */
public final class JsonText {

    private static final JsonNodeFactory NODES = JsonNodeFactory.instance;
    private static final JsonText STANDARD =
            new JsonText(StreamReadConstraints.builder().maxNestingDepth(200).build());

    private final JsonFactory factory;

    /** Reads within limits of its own. */
    JsonText(StreamReadConstraints limits) {
        this.factory = JsonFactory.builder().streamReadConstraints(limits).build();
    }

    /** Returns the reader and writer for text of our own; nesting is limited to 200 levels. */
    public static JsonText standard() {
        return STANDARD;
    }

    /**
     * Reads one value and nothing behind it.
     *
     * @throws JacksonException if that is not what the text is
     */
    public JsonNode read(String text) {
        try (JsonParser parser = factory.createParser(ObjectReadContext.empty(), text)) {
            return whole(parser);
        }
    }

    /** Writes a value, in one line. */
    public String write(JsonNode node) {
        StringWriter text = new StringWriter();
        try (JsonGenerator out = factory.createGenerator(ObjectWriteContext.empty(), text)) {
            write(node, out);
        }
        return text.toString();
    }

    /**
     * Returns the tree of a value made of maps with text keys, lists, texts, numbers and truth values.
     *
     * @throws IllegalArgumentException if there is anything else in it
     */
    public static JsonNode tree(Object value) {
        if (value instanceof Map<?, ?> map) {
            ObjectNode object = NODES.objectNode();
            map.forEach((key, each) -> object.set(String.valueOf(key), tree(each)));
            return object;
        }
        if (value instanceof Iterable<?> list) {
            ArrayNode array = NODES.arrayNode();
            list.forEach(each -> array.add(tree(each)));
            return array;
        }
        if (value instanceof String text) {
            return NODES.stringNode(text);
        }
        if (value instanceof Boolean truth) {
            return NODES.booleanNode(truth);
        }
        if (value instanceof Integer || value instanceof Long || value instanceof Short || value instanceof Byte) {
            return NODES.numberNode(((Number) value).longValue());
        }
        if (value instanceof Number number) {
            return NODES.numberNode(number.doubleValue());
        }
        throw new IllegalArgumentException("a " + value.getClass().getName()
                + " has no form in JSON; use maps, lists, texts, numbers or truth values.");
    }

    private static JsonNode whole(JsonParser parser) {
        JsonToken first = parser.nextToken();
        if (first == null) {
            throw new StreamReadException(parser, "there is nothing in it");
        }
        JsonNode node = value(first, parser);
        if (parser.nextToken() != null) {
            throw new StreamReadException(parser, "there is more behind it");
        }
        return node;
    }

    /** Goes down no deeper than the parser's limit on nesting. */
    private static JsonNode value(JsonToken token, JsonParser parser) {
        return switch (token) {
            case START_OBJECT -> {
                ObjectNode object = NODES.objectNode();
                while (parser.nextToken() == JsonToken.PROPERTY_NAME) {
                    String name = parser.currentName();
                    object.set(name, value(parser.nextToken(), parser));
                }
                yield object;
            }
            case START_ARRAY -> {
                ArrayNode array = NODES.arrayNode();
                for (JsonToken next = parser.nextToken(); next != JsonToken.END_ARRAY; next = parser.nextToken()) {
                    array.add(value(next, parser));
                }
                yield array;
            }
            case VALUE_STRING -> NODES.stringNode(parser.getString());
            case VALUE_TRUE -> NODES.booleanNode(true);
            case VALUE_FALSE -> NODES.booleanNode(false);
            case VALUE_NULL -> NODES.nullNode();
            case VALUE_NUMBER_INT ->
                switch (parser.getNumberType()) {
                    case INT -> NODES.numberNode(parser.getIntValue());
                    case LONG -> NODES.numberNode(parser.getLongValue());
                    default -> NODES.numberNode(parser.getBigIntegerValue());
                };
            case VALUE_NUMBER_FLOAT -> NODES.numberNode(parser.getDoubleValue());
            default -> throw new StreamReadException(parser, "a value is missing");
        };
    }

    private static void write(JsonNode node, JsonGenerator out) {
        switch (node.getNodeType()) {
            case OBJECT -> {
                out.writeStartObject();
                node.properties().forEach(property -> {
                    out.writeName(property.getKey());
                    write(property.getValue(), out);
                });
                out.writeEndObject();
            }
            case ARRAY -> {
                out.writeStartArray();
                node.forEach(each -> write(each, out));
                out.writeEndArray();
            }
            case STRING -> out.writeString(node.stringValue());
            case BOOLEAN -> out.writeBoolean(node.booleanValue());
            case NUMBER -> writeNumber(node, out);
            case NULL -> out.writeNull();
            default ->
                throw new IllegalArgumentException("a " + node.getClass().getSimpleName() + " has no form in JSON");
        }
    }

    private static void writeNumber(JsonNode node, JsonGenerator out) {
        Number number = node.numberValue();
        if (node.isIntegralNumber() && node.canConvertToLong()) {
            out.writeNumber(number.longValue());
        } else if (node.isIntegralNumber()) {
            out.writeNumber(node.bigIntegerValue());
        } else if (number instanceof BigDecimal decimal) {
            out.writeNumber(decimal);
        } else {
            out.writeNumber(number.doubleValue());
        }
    }
}
