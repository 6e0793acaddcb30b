package countwright.worker;

import countwright.show.MimeBundle;
import java.io.DataInputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Optional;

/** Reads what {@link FieldWriter} wrote. Whatever else it is given ends in an exception, without a huge array before. */
final class FieldReader {

    private static final int MAXIMUM_ITEMS = 1 << 20;

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
            int values = readCount();
            Map<String, Object> formMetadata = new LinkedHashMap<>();
            for (int k = 0; k < values; k++) {
                formMetadata.put(readText(), readMetadataValue());
            }
            if (!formMetadata.isEmpty()) {
                metadata.put(type, formMetadata);
            }
        }
        if (!data.containsKey(MimeBundle.TEXT)) {
            throw new IOException("damaged stream: a bundle without " + MimeBundle.TEXT);
        }
        return MimeBundle.of(data, metadata);
    }

    private Object readMetadataValue() throws IOException {
        int tag = in.readUnsignedByte();
        return switch (tag) {
            case Tag.WHOLE -> in.readLong();
            case Tag.DECIMAL -> in.readDouble();
            case Tag.FLAG -> in.readBoolean();
            case Tag.TEXT -> readText();
            default -> throw new IOException("damaged stream: unknown metadata tag " + tag);
        };
    }
}
