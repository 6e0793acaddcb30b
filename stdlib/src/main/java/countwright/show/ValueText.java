package countwright.show;

import java.lang.reflect.Array;
import java.lang.reflect.InvocationTargetException;
import java.lang.reflect.RecordComponent;
import java.util.ArrayList;
import java.util.Collection;
import java.util.Iterator;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.jspecify.annotations.Nullable;

/** Writes a value out as text, the way Java prints collections, but also into arrays, and of long ones only the beginning. */
final class ValueText {

    private static final int MOST_ELEMENTS = 100;
    private static final int MOST_FRAMES = 12;
    private static final int DEEPEST = 6;

    private ValueText() {}

    static String of(Object value) {
        return value instanceof Throwable thrown ? trace(thrown) : of(value, 0);
    }

    private static String of(@Nullable Object value, int depth) {
        if (value == null) {
            return "null";
        }
        if (depth > DEEPEST) {
            return "…";
        }
        if (value.getClass().isArray()) {
            return array(value, depth);
        }
        if (value instanceof Map<?, ?> map) {
            return entries(map, depth);
        }
        if (value instanceof Collection<?> collection) {
            return elements(collection.iterator(), collection.size(), depth);
        }
        if (value instanceof Optional<?> optional) {
            return optional.isEmpty() ? "Optional.empty" : "Optional[" + of(optional.orElse(null), depth + 1) + "]";
        }
        if (value instanceof Record record) {
            return record(record, depth);
        }
        return depth == 0 ? String.valueOf(value) : firstLine(String.valueOf(value));
    }

    private static String array(Object array, int depth) {
        int length = Array.getLength(array);
        List<String> parts = new ArrayList<>();
        for (int i = 0; i < Math.min(length, MOST_ELEMENTS); i++) {
            parts.add(of(Array.get(array, i), depth + 1));
        }
        return "[" + joined(parts, length) + "]";
    }

    private static String elements(Iterator<?> elements, int size, int depth) {
        List<String> parts = new ArrayList<>();
        while (elements.hasNext() && parts.size() < MOST_ELEMENTS) {
            parts.add(of(elements.next(), depth + 1));
        }
        return "[" + joined(parts, size) + "]";
    }

    private static String entries(Map<?, ?> map, int depth) {
        List<String> parts = new ArrayList<>();
        Iterator<? extends Map.Entry<?, ?>> entries = map.entrySet().iterator();
        while (entries.hasNext() && parts.size() < MOST_ELEMENTS) {
            Map.Entry<?, ?> entry = entries.next();
            parts.add(of(entry.getKey(), depth + 1) + "=" + of(entry.getValue(), depth + 1));
        }
        return "{" + joined(parts, map.size()) + "}";
    }

    private static String joined(List<String> parts, int size) {
        int more = size - parts.size();
        return String.join(", ", parts) + (more > 0 ? ", … " + Numbers.count(more) + " more" : "");
    }

    /** Writes a record's components out, unless the record has a text of its own making. */
    private static String record(Record record, int depth) {
        String own = record.toString();
        List<String> plain = new ArrayList<>();
        List<String> deep = new ArrayList<>();
        for (RecordComponent component : record.getClass().getRecordComponents()) {
            Optional<Object> value;
            try {
                component.getAccessor().setAccessible(true);
                value = Optional.ofNullable(component.getAccessor().invoke(record));
            } catch (IllegalAccessException | InvocationTargetException | RuntimeException e) {
                return own;
            }
            plain.add(component.getName() + "=" + value.map(String::valueOf).orElse("null"));
            deep.add(component.getName() + "=" + of(value.orElse(null), depth + 1));
        }
        String name = record.getClass().getSimpleName() + "[";
        return own.equals(name + String.join(", ", plain) + "]") ? name + String.join(", ", deep) + "]" : own;
    }

    private static String firstLine(String text) {
        int end = text.indexOf('\n');
        return end < 0 ? text : text.substring(0, end).stripTrailing() + " …";
    }

    private static String trace(Throwable thrown) {
        StringBuilder text = new StringBuilder();
        Throwable current = thrown;
        for (int depth = 0; current != null && depth < DEEPEST; depth++) {
            text.append(depth == 0 ? "" : "\ncaused by ").append(current);
            StackTraceElement[] frames = current.getStackTrace();
            for (int i = 0; i < Math.min(frames.length, MOST_FRAMES); i++) {
                text.append("\n    at ").append(frames[i]);
            }
            if (frames.length > MOST_FRAMES) {
                text.append("\n    … ").append(Numbers.count(frames.length - MOST_FRAMES, "more frame"));
            }
            current = current.getCause();
        }
        return text.toString();
    }
}
