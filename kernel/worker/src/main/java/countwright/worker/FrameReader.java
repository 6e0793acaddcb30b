package countwright.worker;

import countwright.show.Stage;
import java.io.DataInputStream;
import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;

/** Reads what {@link FrameWriter} wrote. */
final class FrameReader {

    private final DataInputStream in;
    private final FieldReader fields;

    FrameReader(DataInputStream in) {
        this.in = in;
        this.fields = new FieldReader(in);
    }

    Frame read() throws IOException {
        int tag = in.readUnsignedByte();
        return tag == Tag.ASIDE ? new Frame.Aside(in.readLong(), readEvent()) : read(tag);
    }

    /** An aside holds no other, or damage could nest them without end. */
    private Frame.Event readEvent() throws IOException {
        if (read(in.readUnsignedByte()) instanceof Frame.Event event) {
            return event;
        }
        throw new IOException("damaged stream: an aside that is not an event");
    }

    private Frame read(int tag) throws IOException {
        return switch (tag) {
            case Tag.LOAD -> new Frame.Load(readClasses());
            case Tag.INVOKE ->
                new Frame.Invoke(
                        readClasses(), fields.readText(), fields.readText(), fields.readConstant(Frame.Want.values()));
            case Tag.READ_VARIABLE -> new Frame.ReadVariable(fields.readText(), fields.readText());
            case Tag.RELEASE -> new Frame.Release(fields.readText(), fields.readText());
            case Tag.ADD_TO_CLASS_PATH -> new Frame.AddToClassPath(fields.readText());
            case Tag.INTERRUPT -> new Frame.Interrupt();
            case Tag.ANSWER -> new Frame.Answer(in.readInt(), fields.readText());
            case Tag.REFUSE -> new Frame.Refuse(in.readInt(), fields.readText());
            case Tag.LEAVE -> new Frame.Leave();
            case Tag.READY -> new Frame.Ready(fields.readText(), in.readLong());
            case Tag.DONE ->
                new Frame.Done(
                        fields.readText(), in.readBoolean() ? Optional.of(fields.readBundle()) : Optional.empty());
            case Tag.FAILED -> new Frame.Failed(readFault());
            case Tag.OUTPUT ->
                new Frame.Output(fields.readConstant(Frame.Channel.values()), Bytes.keeping(fields.readBytes()));
            case Tag.SHOWN -> new Frame.Shown(fields.readBundle(), fields.readOptionalText());
            case Tag.UPDATED -> new Frame.Updated(fields.readBundle(), fields.readText());
            case Tag.CLEARED -> new Frame.Cleared(fields.readConstant(Stage.Clearing.values()));
            case Tag.ASKED ->
                new Frame.Asked(in.readInt(), fields.readText(), fields.readConstant(Stage.Echo.values()));
            case Tag.PAGED -> new Frame.Paged(fields.readBundle());
            case Tag.NEXT_INPUT -> new Frame.NextInput(fields.readText());
            case Tag.COMM_SENT -> new Frame.CommSent(fields.readCommMessage());
            case Tag.COMM_RECEIVED -> new Frame.CommReceived(in.readLong(), fields.readCommMessage());
            case Tag.INTERRUPT_HANDLER -> new Frame.InterruptHandler();
            case Tag.HANDLED ->
                new Frame.Handled(in.readLong(), in.readBoolean() ? Optional.of(readFault()) : Optional.empty());
            default -> throw new IOException("damaged stream: unknown frame tag " + tag);
        };
    }

    private List<CompiledClass> readClasses() throws IOException {
        int count = fields.readCount();
        List<CompiledClass> classes = new ArrayList<>(count);
        for (int i = 0; i < count; i++) {
            classes.add(new CompiledClass(fields.readText(), Bytes.keeping(fields.readBytes())));
        }
        return classes;
    }

    private Fault readFault() throws IOException {
        int tag = in.readUnsignedByte();
        return switch (tag) {
            case Tag.THROWN -> readThrown(0);
            case Tag.UNRESOLVED -> new Fault.Unresolved(in.readInt(), readFrames());
            case Tag.STOPPED -> new Fault.Stopped();
            case Tag.NOT_INSTALLED -> {
                String message = fields.readText();
                int count = fields.readCount();
                List<Boolean> installed = new ArrayList<>(count);
                for (int i = 0; i < count; i++) {
                    installed.add(in.readBoolean());
                }
                yield new Fault.NotInstalled(message, installed);
            }
            case Tag.INTERNAL -> new Fault.Internal(fields.readText());
            default -> throw new IOException("damaged stream: unknown fault tag " + tag);
        };
    }

    private Fault.Thrown readThrown(int depth) throws IOException {
        if (depth > Faults.DEEPEST_CAUSE) {
            throw new IOException("damaged stream: a chain of more than " + Faults.DEEPEST_CAUSE + " causes");
        }
        String className = fields.readText();
        Optional<String> message = fields.readOptionalText();
        List<StackTraceElement> frames = readFrames();
        Optional<Fault.Thrown> cause = in.readBoolean() ? Optional.of(readThrown(depth + 1)) : Optional.empty();
        return new Fault.Thrown(className, message, frames, cause);
    }

    private List<StackTraceElement> readFrames() throws IOException {
        int count = fields.readCount();
        List<StackTraceElement> frames = new ArrayList<>(count);
        for (int i = 0; i < count; i++) {
            frames.add(new StackTraceElement(
                    fields.readText(),
                    fields.readText(),
                    fields.readOptionalText().orElse(null),
                    in.readInt()));
        }
        return frames;
    }
}
