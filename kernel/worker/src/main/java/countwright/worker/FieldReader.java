package countwright.worker;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import java.io.DataInputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** Reads what {@link FieldWriter} wrote. Whatever else it is given ends in an exception, without a huge array before. */
final class FieldReader {

    private static final int MAXIMUM_ITEMS = 1 << 20;

    /** A little more than what may be sent. */
    private static final int DEEPEST = 100;

    private final DataInputStream in;

    FieldReader(DataInputStream in) {
        this.in = in;
    }

    String readText() throws IOException {
        return new String(readBytes(), StandardCharsets.UTF_8);
    }

    Optional<String> readOptionalText() throws IOException {
        return in.readBoolean() ? Optional.of(readText()) : Optional.empty();
    }

    byte[] readBytes() throws IOException {
        int length = in.readInt();
        if (length < 0 || length > FrameStream.MAXIMUM_FIELD) {
            throw new IOException("damaged stream: a field of " + length + " bytes");
        }
        byte[] bytes = in.readNBytes(length);
        if (bytes.length < length) {
            throw new IOException("the stream ended inside a frame");
        }
        return bytes;
    }

    int readCount() throws IOException {
        int count = in.readInt();
        if (count < 0 || count > MAXIMUM_ITEMS) {
            throw new IOException("damaged stream: a list of " + count + " items");
        }
        return count;
    }

    <E extends Enum<E>> E readConstant(E[] constants) throws IOException {
        int ordinal = in.readUnsignedByte();
        if (ordinal >= constants.length) {
            throw new IOException("damaged stream: constant " + ordinal + " of " + constants.length);
        }
        return constants[ordinal];
    }

    MimeBundle readBundle() throws IOException {
        int forms = readCount();
        Map<String, String> data = new LinkedHashMap<>();
        Map<String, Map<String, Object>> metadata = new LinkedHashMap<>();
        for (int i = 0; i < forms; i++) {
            String type = readText();
            data.put(type, readText());
            Map<String, Object> formMetadata = readObject(0);
            if (!formMetadata.isEmpty()) {
                metadata.put(type, formMetadata);
            }
        }
        if (!data.containsKey(MimeBundle.TEXT)) {
            throw new IOException("damaged stream: a bundle without " + MimeBundle.TEXT);
        }
        return MimeBundle.of(data, metadata);
    }

    CommMessage readCommMessage() throws IOException {
        CommMessage.Kind kind = readConstant(CommMessage.Kind.values());
        String commId = readText();
        String target = readText();
        try {
            return new CommMessage(kind, commId, target, readObject(0));
        } catch (IllegalArgumentException e) {
            throw new IOException("damaged stream: " + e.getMessage(), e);
        }
    }

    private Map<String, Object> readObject(int depth) throws IOException {
        int count = readCount();
        Map<String, Object> values = new LinkedHashMap<>();
        for (int i = 0; i < count; i++) {
            values.put(readText(), readValue(depth + 1));
        }
        return values;
    }

    private List<Object> readList(int depth) throws IOException {
        int count = readCount();
        List<Object> items = new ArrayList<>();
        for (int i = 0; i < count; i++) {
            items.add(readValue(depth + 1));
        }
        return items;
    }

    private Object readValue(int depth) throws IOException {
        if (depth > DEEPEST) {
            throw new IOException("damaged stream: values nested more than " + DEEPEST + " deep");
        }
        int tag = in.readUnsignedByte();
        return switch (tag) {
            case Tag.WHOLE -> in.readLong();
            case Tag.DECIMAL -> in.readDouble();
            case Tag.FLAG -> in.readBoolean();
            case Tag.TEXT -> readText();
            case Tag.LIST -> readList(depth);
            case Tag.OBJECT -> readObject(depth);
            case Tag.NOTHING -> Optional.empty();
            default -> throw new IOException("damaged stream: unknown value tag " + tag);
        };
    }
}
