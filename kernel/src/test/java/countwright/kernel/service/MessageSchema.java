package countwright.kernel.service;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.Header;
import countwright.kernel.wire.Message;
import java.io.IOException;
import java.io.InputStream;
import java.time.OffsetDateTime;
import java.time.format.DateTimeParseException;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeSet;
import java.util.concurrent.ConcurrentHashMap;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;

/**
 * What the protocol's specification says of each type of message, as data: one file a type in the folder
 * {@code protocol}, in words of our own.
 *
 * <p>A file says on which channels the type goes, of which types its parent may be ({@code none} for no parent), and the
 * type of each field of the content; a question mark after a name means that the field may be absent. Under
 * {@code variants} stand further fields that depend on the value of one field, and that field then has no other values.
 * Types are {@code text}, {@code whole}, {@code number}, {@code flag}, {@code object}, {@code list}, {@code any},
 * {@code bundle} (forms by media type), {@code list of TYPE}, {@code map of TYPE}, or the name of a file. A field that no
 * file knows is a fault.
 */
final class MessageSchema {

    private static final Map<String, JsonNode> READ = new ConcurrentHashMap<>();

    private MessageSchema() {}

    /** Returns what is wrong with a message as it went over a channel; empty if nothing is. */
    static List<String> faultsOf(Message message, Channel channel) {
        List<String> faults = new ArrayList<>();
        String type = message.type();
        JsonNode schema = read(type);
        if (!texts(schema.path("on")).contains(channel.protocolName())) {
            faults.add(type + " came on " + channel.protocolName());
        }
        headerFaults(message.header(), type, faults);
        String parent = message.parent().map(Header::type).orElse("none");
        Set<String> parents = texts(schema.path("parent"));
        if (!parents.contains(parent)
                && !(parents.contains("any") && message.parent().isPresent())) {
            faults.add(type + " has the parent " + parent);
        }
        objectFaults(type, message.content(), schema, faults);
        return faults;
    }

    private static void headerFaults(Header header, String type, List<String> faults) {
        JsonNode json = header.toJson();
        for (String field : List.of("msg_id", "msg_type", "session", "username", "date", "version")) {
            if (!json.path(field).isString() || json.path(field).stringValue().isEmpty()) {
                faults.add(type + ": header." + field + " is no text");
            }
        }
        if (!json.path("version").stringValue("").equals("5.5")) {
            faults.add(type + ": header.version is " + json.path("version"));
        }
        try {
            OffsetDateTime.parse(json.path("date").stringValue(""));
        } catch (DateTimeParseException e) {
            faults.add(type + ": header.date is no ISO 8601 date with a zone");
        }
    }

    private static void objectFaults(String place, JsonNode object, JsonNode schema, List<String> faults) {
        if (!object.isObject()) {
            faults.add(place + " is no object");
            return;
        }
        Set<String> known = new HashSet<>();
        fieldFaults(place, object, schema.path("content"), known, faults);
        schema.path("variants").properties().forEach(variant -> {
            String value = object.path(variant.getKey()).stringValue("");
            JsonNode fields = variant.getValue().path(value);
            if (fields.isMissingNode()) {
                faults.add(place + "." + variant.getKey() + " is '" + value + "'");
            }
            fieldFaults(place, object, fields, known, faults);
        });
        Set<String> unknown = new TreeSet<>(object.propertyNames());
        unknown.removeAll(known);
        unknown.forEach(field -> faults.add(place + "." + field + " is not known to the protocol"));
    }

    private static void fieldFaults(
            String place, JsonNode object, JsonNode fields, Set<String> known, List<String> faults) {
        fields.properties().forEach(field -> {
            boolean optional = field.getKey().endsWith("?");
            String name = field.getKey().replace("?", "");
            known.add(name);
            JsonNode value = object.path(name);
            if (!value.isMissingNode()) {
                valueFaults(place + "." + name, value, field.getValue().stringValue(), faults);
            } else if (!optional) {
                faults.add(place + "." + name + " is missing");
            }
        });
    }

    private static void valueFaults(String place, JsonNode value, String type, List<String> faults) {
        boolean fits = switch (type) {
            case "text" -> value.isString();
            case "whole" -> value.isIntegralNumber();
            case "number" -> value.isNumber();
            case "flag" -> value.isBoolean();
            case "object" -> value.isObject();
            case "list" -> value.isArray();
            case "any" -> true;
            case "bundle" ->
                value.isObject()
                        && value.properties().stream()
                                .allMatch(form -> form.getKey().contains("/")
                                        && (form.getValue().isString()
                                                || form.getKey().contains("json")));
            default -> compoundFits(place, value, type, faults);
        };
        if (!fits) {
            faults.add(place + " is " + value.getNodeType() + ", not " + type);
        }
    }

    private static boolean compoundFits(String place, JsonNode value, String type, List<String> faults) {
        if (type.startsWith("list of ")) {
            value.forEach(item -> valueFaults(place + "[]", item, type.substring("list of ".length()), faults));
            return value.isArray();
        }
        if (type.startsWith("map of ")) {
            value.forEach(item -> valueFaults(place + ".*", item, type.substring("map of ".length()), faults));
            return value.isObject();
        }
        objectFaults(place, value, read(type), faults);
        return true;
    }

    private static Set<String> texts(JsonNode list) {
        Set<String> texts = new HashSet<>();
        list.forEach(item -> texts.add(item.stringValue()));
        return texts;
    }

    private static JsonNode read(String name) {
        return READ.computeIfAbsent(name, each -> {
            try (InputStream in = MessageSchema.class.getResourceAsStream("protocol/" + each + ".json")) {
                if (in == null) {
                    throw new AssertionError("the protocol has no " + each);
                }
                return JsonMapper.shared().readTree(in.readAllBytes());
            } catch (IOException e) {
                throw new AssertionError(e);
            }
        });
    }
}
