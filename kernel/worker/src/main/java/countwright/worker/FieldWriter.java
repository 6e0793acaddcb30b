package countwright.worker;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import java.io.DataOutputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** Writes what frames are made of: texts, bytes, constants, bundles. {@link FieldReader} is its other end. */
final class FieldWriter {

    private final DataOutputStream out;

    FieldWriter(DataOutputStream out) {
        this.out = out;
    }

    void writeText(String text) throws IOException {
        writeBytes(text.getBytes(StandardCharsets.UTF_8));
    }

    void writeOptionalText(Optional<String> text) throws IOException {
        out.writeBoolean(text.isPresent());
        if (text.isPresent()) {
            writeText(text.get());
        }
    }

    void writeBytes(byte[] bytes) throws IOException {
        if (bytes.length > FrameStream.MAXIMUM_FIELD) {
            throw new IOException(
                    "a field of " + bytes.length + " bytes exceeds the limit of " + FrameStream.MAXIMUM_FIELD);
        }
        out.writeInt(bytes.length);
        out.write(bytes);
    }

    /** By position, since both ends always come from the same build. */
    @SuppressWarnings("EnumOrdinal")
    void writeConstant(Enum<?> constant) throws IOException {
        out.writeByte(constant.ordinal());
    }

    void writeBundle(MimeBundle bundle) throws IOException {
        out.writeInt(bundle.data().size());
        for (Map.Entry<String, String> form : bundle.data().entrySet()) {
            writeText(form.getKey());
            writeText(form.getValue());
            Map<String, Object> values = bundle.metadata().getOrDefault(form.getKey(), Map.of());
            writeObject(values);
        }
    }

    void writeCommMessage(CommMessage message) throws IOException {
        writeConstant(message.kind());
        writeText(message.commId());
        writeText(message.target());
        writeObject(message.data());
    }

    private void writeObject(Map<?, ?> values) throws IOException {
        out.writeInt(values.size());
        for (Map.Entry<?, ?> value : values.entrySet()) {
            writeText(value.getKey().toString());
            writeValue(value.getValue());
        }
    }

    /** Writes a value of JSON, its null as an empty Optional; what is of no such type goes as its text. */
    private void writeValue(Object value) throws IOException {
        if (value instanceof Integer || value instanceof Long) {
            out.writeByte(Tag.WHOLE);
            out.writeLong(((Number) value).longValue());
        } else if (value instanceof Number number) {
            out.writeByte(Tag.DECIMAL);
            out.writeDouble(number.doubleValue());
        } else if (value instanceof Boolean flag) {
            out.writeByte(Tag.FLAG);
            out.writeBoolean(flag);
        } else if (value instanceof List<?> items) {
            out.writeByte(Tag.LIST);
            out.writeInt(items.size());
            for (Object item : items) {
                writeValue(item);
            }
        } else if (value instanceof Map<?, ?> values) {
            out.writeByte(Tag.OBJECT);
            writeObject(values);
        } else if (value instanceof Optional<?> optional && optional.isEmpty()) {
            out.writeByte(Tag.NOTHING);
        } else {
            out.writeByte(Tag.TEXT);
            writeText(value.toString());
        }
    }
}
