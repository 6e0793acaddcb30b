package countwright.show;

import java.util.ArrayList;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.jspecify.annotations.Nullable;

/** Makes values into those that JSON has, deeply immutable: text, Long, Double, Boolean, List, Map, an empty Optional. */
final class CommData {

    /** Deeper than any sensible message; a list that contains itself ends here. */
    private static final int DEEPEST = 64;

    private CommData() {}

    static Map<String, Object> copyOf(Map<String, ?> data) {
        return object("data", data, 0);
    }

    private static Map<String, Object> object(String place, Map<?, ?> values, int depth) {
        checkDepth(place, depth);
        Map<String, Object> copy = new LinkedHashMap<>();
        values.forEach((key, value) -> {
            if (!(key instanceof CharSequence)) {
                throw new IllegalArgumentException(
                        place + " has the key " + key + ", but the keys of JSON are texts. Use a text as the key.");
            }
            copy.put(key.toString(), value(place + "." + key, value, depth + 1));
        });
        return Collections.unmodifiableMap(copy);
    }

    private static Object value(String place, @Nullable Object value, int depth) {
        if (value == null) {
            return Optional.empty();
        }
        if (value instanceof Optional<?> optional) {
            return value(place, optional.orElse(null), depth);
        }
        if (value instanceof Boolean) {
            return value;
        }
        if (value instanceof CharSequence || value instanceof Character || value instanceof Enum<?>) {
            return value.toString();
        }
        if (value instanceof Long || value instanceof Integer || value instanceof Short || value instanceof Byte) {
            return ((Number) value).longValue();
        }
        if (value instanceof Number number) {
            return decimal(place, number.doubleValue());
        }
        if (value instanceof Map<?, ?> map) {
            return object(place, map, depth);
        }
        if (value instanceof Iterable<?> items) {
            checkDepth(place, depth);
            List<Object> copy = new ArrayList<>();
            for (Object item : items) {
                copy.add(value(place + "[" + copy.size() + "]", item, depth + 1));
            }
            return Collections.unmodifiableList(copy);
        }
        throw new IllegalArgumentException(place + " is of type "
                + value.getClass().getSimpleName()
                + ", which JSON does not have. Use texts, numbers, true or false, lists and maps.");
    }

    private static Double decimal(String place, double number) {
        if (!Double.isFinite(number)) {
            throw new IllegalArgumentException(place + " is " + number
                    + ", which JSON does not have. Leave it out, or send Optional.empty() in its place.");
        }
        return number;
    }

    private static void checkDepth(String place, int depth) {
        if (depth > DEEPEST) {
            throw new IllegalArgumentException("data is nested more than " + DEEPEST + " deep, at "
                    + place.substring(0, Math.min(place.length(), 100)) + ". Does it contain itself?");
        }
    }
}
