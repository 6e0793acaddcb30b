package countwright.worker;

import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.io.BufferedInputStream;
import java.io.BufferedOutputStream;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/**
 * Frames over a pair of byte streams: a tag byte, then the fields.
 *
 * <p>Our own encoding instead of Java serialisation, because the kernel reads what a process full of user code writes:
 * nothing but these records can come out of it. One thread reads; writing is the caller's to serialise. Nothing is
 * flushed before {@link #flush}.
 */
public final class FrameStream {

    /** The longest text or byte field accepted, 256 MiB: beyond it the stream is taken for damaged. */
    static final int MAXIMUM_FIELD = 256 << 20;

    private static final int MAXIMUM_ITEMS = 1 << 20;

    private final DataInputStream in;
    private final DataOutputStream out;

    public FrameStream(InputStream in, OutputStream out) {
        this.in = new DataInputStream(new BufferedInputStream(in, 1 << 16));
        this.out = new DataOutputStream(new BufferedOutputStream(out, 1 << 16));
    }

    /** Writes a frame without flushing it. */
    public void write(Frame frame) throws IOException {
        if (frame instanceof Frame.Load load) {
            out.writeByte(Tag.LOAD);
            out.writeInt(load.classes().size());
            for (CompiledClass compiled : load.classes()) {
                writeText(compiled.name());
                writeBytes(compiled.bytecode().toArray());
            }
        } else if (frame instanceof Frame.Invoke invoke) {
            out.writeByte(Tag.INVOKE);
            writeText(invoke.className());
            writeText(invoke.methodName());
            writeConstant(invoke.want());
        } else if (frame instanceof Frame.ReadVariable read) {
            out.writeByte(Tag.READ_VARIABLE);
            writeText(read.className());
            writeText(read.variableName());
        } else if (frame instanceof Frame.AddToClassPath add) {
            out.writeByte(Tag.ADD_TO_CLASS_PATH);
            writeText(add.path());
        } else if (frame instanceof Frame.Interrupt) {
            out.writeByte(Tag.INTERRUPT);
        } else if (frame instanceof Frame.Answer answer) {
            out.writeByte(Tag.ANSWER);
            out.writeInt(answer.question());
            writeText(answer.line());
        } else if (frame instanceof Frame.Refuse refuse) {
            out.writeByte(Tag.REFUSE);
            out.writeInt(refuse.question());
            writeText(refuse.reason());
        } else if (frame instanceof Frame.Leave) {
            out.writeByte(Tag.LEAVE);
        } else if (frame instanceof Frame.CellStarted started) {
            out.writeByte(Tag.CELL_STARTED);
            out.writeInt(started.restorable());
        } else if (frame instanceof Frame.StopWhenSpeaking) {
            out.writeByte(Tag.STOP_WHEN_SPEAKING);
        } else if (frame instanceof Frame.CloseAwaited) {
            out.writeByte(Tag.CLOSE_AWAITED);
        } else if (frame instanceof Frame.RestoreAsked) {
            out.writeByte(Tag.RESTORE_ASKED);
        } else if (frame instanceof Frame.Ready ready) {
            out.writeByte(Tag.READY);
            writeText(ready.token());
            out.writeLong(ready.processId());
        } else if (frame instanceof Frame.Done done) {
            out.writeByte(Tag.DONE);
            writeText(done.text());
            out.writeBoolean(done.value().isPresent());
            if (done.value().isPresent()) {
                writeBundle(done.value().get());
            }
        } else if (frame instanceof Frame.Failed failed) {
            out.writeByte(Tag.FAILED);
            writeFault(failed.fault());
        } else if (frame instanceof Frame.Output output) {
            out.writeByte(Tag.OUTPUT);
            writeConstant(output.channel());
            writeBytes(output.bytes().toArray());
        } else if (frame instanceof Frame.Shown shown) {
            out.writeByte(Tag.SHOWN);
            writeBundle(shown.bundle());
            writeOptionalText(shown.displayId());
        } else if (frame instanceof Frame.Updated updated) {
            out.writeByte(Tag.UPDATED);
            writeBundle(updated.bundle());
            writeText(updated.displayId());
        } else if (frame instanceof Frame.Cleared cleared) {
            out.writeByte(Tag.CLEARED);
            writeConstant(cleared.when());
        } else if (frame instanceof Frame.Asked asked) {
            out.writeByte(Tag.ASKED);
            out.writeInt(asked.question());
            writeText(asked.prompt());
            writeConstant(asked.echo());
        } else {
            throw new IllegalArgumentException("no encoding for " + frame);
        }
    }

    /** Sends everything written so far. */
    public void flush() throws IOException {
        out.flush();
    }

    /**
     * Reads the next frame, waiting for it.
     *
     * @throws java.io.EOFException if the other side has closed the stream
     * @throws IOException if the stream is broken, or carries something that is not a frame
     */
    public Frame read() throws IOException {
        int tag = in.readUnsignedByte();
        return switch (tag) {
            case Tag.LOAD -> new Frame.Load(readClasses());
            case Tag.INVOKE -> new Frame.Invoke(readText(), readText(), readConstant(Frame.Want.values()));
            case Tag.READ_VARIABLE -> new Frame.ReadVariable(readText(), readText());
            case Tag.ADD_TO_CLASS_PATH -> new Frame.AddToClassPath(readText());
            case Tag.INTERRUPT -> new Frame.Interrupt();
            case Tag.ANSWER -> new Frame.Answer(in.readInt(), readText());
            case Tag.REFUSE -> new Frame.Refuse(in.readInt(), readText());
            case Tag.LEAVE -> new Frame.Leave();
            case Tag.CELL_STARTED -> new Frame.CellStarted(in.readInt());
            case Tag.STOP_WHEN_SPEAKING -> new Frame.StopWhenSpeaking();
            case Tag.CLOSE_AWAITED -> new Frame.CloseAwaited();
            case Tag.RESTORE_ASKED -> new Frame.RestoreAsked();
            case Tag.READY -> new Frame.Ready(readText(), in.readLong());
            case Tag.DONE ->
                new Frame.Done(readText(), in.readBoolean() ? Optional.of(readBundle()) : Optional.empty());
            case Tag.FAILED -> new Frame.Failed(readFault());
            case Tag.OUTPUT -> new Frame.Output(readConstant(Frame.Channel.values()), Bytes.keeping(readBytes()));
            case Tag.SHOWN -> new Frame.Shown(readBundle(), readOptionalText());
            case Tag.UPDATED -> new Frame.Updated(readBundle(), readText());
            case Tag.CLEARED -> new Frame.Cleared(readConstant(Stage.Clearing.values()));
            case Tag.ASKED -> new Frame.Asked(in.readInt(), readText(), readConstant(Stage.Echo.values()));
            default -> throw new IOException("damaged stream: unknown frame tag " + tag);
        };
    }

    private List<CompiledClass> readClasses() throws IOException {
        int count = readCount();
        List<CompiledClass> classes = new ArrayList<>(count);
        for (int i = 0; i < count; i++) {
            classes.add(new CompiledClass(readText(), Bytes.keeping(readBytes())));
        }
        return classes;
    }

    private void writeFault(Fault fault) throws IOException {
        if (fault instanceof Fault.Thrown thrown) {
            out.writeByte(Tag.THROWN);
            writeThrown(thrown);
        } else if (fault instanceof Fault.Unresolved unresolved) {
            out.writeByte(Tag.UNRESOLVED);
            out.writeInt(unresolved.id());
            writeFrames(unresolved.frames());
        } else if (fault instanceof Fault.Stopped) {
            out.writeByte(Tag.STOPPED);
        } else if (fault instanceof Fault.NotInstalled notInstalled) {
            out.writeByte(Tag.NOT_INSTALLED);
            writeText(notInstalled.message());
            out.writeInt(notInstalled.installed().size());
            for (boolean installed : notInstalled.installed()) {
                out.writeBoolean(installed);
            }
        } else if (fault instanceof Fault.Internal internal) {
            out.writeByte(Tag.INTERNAL);
            writeText(internal.message());
        }
    }

    private Fault readFault() throws IOException {
        int tag = in.readUnsignedByte();
        return switch (tag) {
            case Tag.THROWN -> readThrown(0);
            case Tag.UNRESOLVED -> new Fault.Unresolved(in.readInt(), readFrames());
            case Tag.STOPPED -> new Fault.Stopped();
            case Tag.NOT_INSTALLED -> {
                String message = readText();
                int count = readCount();
                List<Boolean> installed = new ArrayList<>(count);
                for (int i = 0; i < count; i++) {
                    installed.add(in.readBoolean());
                }
                yield new Fault.NotInstalled(message, installed);
            }
            case Tag.INTERNAL -> new Fault.Internal(readText());
            default -> throw new IOException("damaged stream: unknown fault tag " + tag);
        };
    }

    private void writeThrown(Fault.Thrown thrown) throws IOException {
        writeText(thrown.className());
        writeOptionalText(thrown.message());
        writeFrames(thrown.frames());
        out.writeBoolean(thrown.cause().isPresent());
        if (thrown.cause().isPresent()) {
            writeThrown(thrown.cause().get());
        }
    }

    private Fault.Thrown readThrown(int depth) throws IOException {
        if (depth > Faults.DEEPEST_CAUSE) {
            throw new IOException("damaged stream: a chain of more than " + Faults.DEEPEST_CAUSE + " causes");
        }
        String className = readText();
        Optional<String> message = readOptionalText();
        List<StackTraceElement> frames = readFrames();
        Optional<Fault.Thrown> cause = in.readBoolean() ? Optional.of(readThrown(depth + 1)) : Optional.empty();
        return new Fault.Thrown(className, message, frames, cause);
    }

    private void writeFrames(List<StackTraceElement> frames) throws IOException {
        out.writeInt(frames.size());
        for (StackTraceElement frame : frames) {
            writeText(frame.getClassName());
            writeText(frame.getMethodName());
            writeOptionalText(Optional.ofNullable(frame.getFileName()));
            out.writeInt(frame.getLineNumber());
        }
    }

    private List<StackTraceElement> readFrames() throws IOException {
        int count = readCount();
        List<StackTraceElement> frames = new ArrayList<>(count);
        for (int i = 0; i < count; i++) {
            frames.add(new StackTraceElement(
                    readText(), readText(), readOptionalText().orElse(null), in.readInt()));
        }
        return frames;
    }

    private void writeBundle(MimeBundle bundle) throws IOException {
        out.writeInt(bundle.data().size());
        for (Map.Entry<String, String> form : bundle.data().entrySet()) {
            writeText(form.getKey());
            writeText(form.getValue());
            Map<String, Object> values = bundle.metadata().getOrDefault(form.getKey(), Map.of());
            out.writeInt(values.size());
            for (Map.Entry<String, Object> value : values.entrySet()) {
                writeText(value.getKey());
                writeMetadataValue(value.getValue());
            }
        }
    }

    private void writeMetadataValue(Object value) throws IOException {
        if (value instanceof Integer || value instanceof Long) {
            out.writeByte(Tag.WHOLE);
            out.writeLong(((Number) value).longValue());
        } else if (value instanceof Number number) {
            out.writeByte(Tag.DECIMAL);
            out.writeDouble(number.doubleValue());
        } else if (value instanceof Boolean flag) {
            out.writeByte(Tag.FLAG);
            out.writeBoolean(flag);
        } else {
            out.writeByte(Tag.TEXT);
            writeText(value.toString());
        }
    }

    private MimeBundle readBundle() throws IOException {
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

    private void writeText(String text) throws IOException {
        writeBytes(text.getBytes(StandardCharsets.UTF_8));
    }

    private String readText() throws IOException {
        return new String(readBytes(), StandardCharsets.UTF_8);
    }

    private void writeOptionalText(Optional<String> text) throws IOException {
        out.writeBoolean(text.isPresent());
        if (text.isPresent()) {
            writeText(text.get());
        }
    }

    private Optional<String> readOptionalText() throws IOException {
        return in.readBoolean() ? Optional.of(readText()) : Optional.empty();
    }

    private void writeBytes(byte[] bytes) throws IOException {
        if (bytes.length > MAXIMUM_FIELD) {
            throw new IOException("a field of " + bytes.length + " bytes exceeds the limit of " + MAXIMUM_FIELD);
        }
        out.writeInt(bytes.length);
        out.write(bytes);
    }

    private byte[] readBytes() throws IOException {
        int length = in.readInt();
        if (length < 0 || length > MAXIMUM_FIELD) {
            throw new IOException("damaged stream: a field of " + length + " bytes");
        }
        byte[] bytes = in.readNBytes(length);
        if (bytes.length < length) {
            throw new IOException("the stream ended inside a frame");
        }
        return bytes;
    }

    private int readCount() throws IOException {
        int count = in.readInt();
        if (count < 0 || count > MAXIMUM_ITEMS) {
            throw new IOException("damaged stream: a list of " + count + " items");
        }
        return count;
    }

    /** By position, since both ends always come from the same build. */
    @SuppressWarnings("EnumOrdinal")
    private void writeConstant(Enum<?> constant) throws IOException {
        out.writeByte(constant.ordinal());
    }

    private <E extends Enum<E>> E readConstant(E[] constants) throws IOException {
        int ordinal = in.readUnsignedByte();
        if (ordinal >= constants.length) {
            throw new IOException("damaged stream: constant " + ordinal + " of " + constants.length);
        }
        return constants[ordinal];
    }

    /** What the first byte of a frame, a fault or a metadata value says. */
    private static final class Tag {
        static final int LOAD = 1;
        static final int INVOKE = 2;
        static final int READ_VARIABLE = 3;
        static final int ADD_TO_CLASS_PATH = 4;
        static final int INTERRUPT = 5;
        static final int ANSWER = 6;
        static final int REFUSE = 7;
        static final int LEAVE = 8;
        static final int READY = 16;
        static final int DONE = 17;
        static final int FAILED = 18;
        static final int OUTPUT = 19;
        static final int SHOWN = 20;
        static final int UPDATED = 21;
        static final int CLEARED = 22;
        static final int ASKED = 23;
        static final int CELL_STARTED = 40;
        static final int CLOSE_AWAITED = 41;
        static final int RESTORE_ASKED = 42;
        static final int STOP_WHEN_SPEAKING = 43;
        static final int THROWN = 1;
        static final int UNRESOLVED = 2;
        static final int STOPPED = 3;
        static final int NOT_INSTALLED = 4;
        static final int INTERNAL = 5;
        static final int WHOLE = 1;
        static final int DECIMAL = 2;
        static final int FLAG = 3;
        static final int TEXT = 4;
    }
}
