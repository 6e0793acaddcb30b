package countwright.worker;

import java.io.DataOutputStream;
import java.io.IOException;
import java.util.List;
import java.util.Optional;

/** Writes frames: a tag byte, then the fields. {@link FrameReader} is its other end. */
final class FrameWriter {

    private final DataOutputStream out;
    private final FieldWriter fields;

    FrameWriter(DataOutputStream out) {
        this.out = out;
        this.fields = new FieldWriter(out);
    }

    void write(Frame frame) throws IOException {
        if (frame instanceof Frame.Load load) {
            out.writeByte(Tag.LOAD);
            writeClasses(load.classes());
        } else if (frame instanceof Frame.Invoke invoke) {
            out.writeByte(Tag.INVOKE);
            writeClasses(invoke.classes());
            fields.writeText(invoke.className());
            fields.writeText(invoke.methodName());
            fields.writeConstant(invoke.want());
        } else if (frame instanceof Frame.ReadVariable read) {
            out.writeByte(Tag.READ_VARIABLE);
            fields.writeText(read.className());
            fields.writeText(read.variableName());
        } else if (frame instanceof Frame.Release release) {
            out.writeByte(Tag.RELEASE);
            fields.writeText(release.className());
            fields.writeText(release.variableName());
        } else if (frame instanceof Frame.AddToClassPath add) {
            out.writeByte(Tag.ADD_TO_CLASS_PATH);
            fields.writeText(add.path());
        } else if (frame instanceof Frame.Interrupt) {
            out.writeByte(Tag.INTERRUPT);
        } else if (frame instanceof Frame.Answer answer) {
            out.writeByte(Tag.ANSWER);
            out.writeInt(answer.question());
            fields.writeText(answer.line());
        } else if (frame instanceof Frame.Refuse refuse) {
            out.writeByte(Tag.REFUSE);
            out.writeInt(refuse.question());
            fields.writeText(refuse.reason());
        } else if (frame instanceof Frame.Leave) {
            out.writeByte(Tag.LEAVE);
        } else if (frame instanceof Frame.Ready ready) {
            out.writeByte(Tag.READY);
            fields.writeText(ready.token());
            out.writeLong(ready.processId());
        } else if (frame instanceof Frame.Done done) {
            out.writeByte(Tag.DONE);
            fields.writeText(done.text());
            out.writeBoolean(done.value().isPresent());
            if (done.value().isPresent()) {
                fields.writeBundle(done.value().get());
            }
        } else if (frame instanceof Frame.Failed failed) {
            out.writeByte(Tag.FAILED);
            writeFault(failed.fault());
        } else if (frame instanceof Frame.Output output) {
            out.writeByte(Tag.OUTPUT);
            fields.writeConstant(output.channel());
            fields.writeBytes(output.bytes().toArray());
        } else if (frame instanceof Frame.Shown shown) {
            out.writeByte(Tag.SHOWN);
            fields.writeBundle(shown.bundle());
            fields.writeOptionalText(shown.displayId());
        } else if (frame instanceof Frame.Updated updated) {
            out.writeByte(Tag.UPDATED);
            fields.writeBundle(updated.bundle());
            fields.writeText(updated.displayId());
        } else if (frame instanceof Frame.Cleared cleared) {
            out.writeByte(Tag.CLEARED);
            fields.writeConstant(cleared.when());
        } else if (frame instanceof Frame.Asked asked) {
            out.writeByte(Tag.ASKED);
            out.writeInt(asked.question());
            fields.writeText(asked.prompt());
            fields.writeConstant(asked.echo());
        } else if (frame instanceof Frame.Paged paged) {
            out.writeByte(Tag.PAGED);
            fields.writeBundle(paged.bundle());
        } else if (frame instanceof Frame.NextInput next) {
            out.writeByte(Tag.NEXT_INPUT);
            fields.writeText(next.code());
        } else if (frame instanceof Frame.CommSent sent) {
            out.writeByte(Tag.COMM_SENT);
            fields.writeCommMessage(sent.message());
        } else if (frame instanceof Frame.CommReceived received) {
            out.writeByte(Tag.COMM_RECEIVED);
            out.writeLong(received.number());
            fields.writeCommMessage(received.message());
        } else if (frame instanceof Frame.InterruptHandler) {
            out.writeByte(Tag.INTERRUPT_HANDLER);
        } else if (frame instanceof Frame.Aside aside) {
            out.writeByte(Tag.ASIDE);
            out.writeLong(aside.number());
            write(aside.event());
        } else if (frame instanceof Frame.Handled handled) {
            out.writeByte(Tag.HANDLED);
            out.writeLong(handled.number());
            out.writeBoolean(handled.fault().isPresent());
            if (handled.fault().isPresent()) {
                writeFault(handled.fault().get());
            }
        } else {
            throw new IllegalArgumentException("no encoding for " + frame);
        }
    }

    private void writeClasses(List<CompiledClass> classes) throws IOException {
        out.writeInt(classes.size());
        for (CompiledClass compiled : classes) {
            fields.writeText(compiled.name());
            fields.writeBytes(compiled.bytecode().toArray());
        }
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
            fields.writeText(notInstalled.message());
            out.writeInt(notInstalled.installed().size());
            for (boolean installed : notInstalled.installed()) {
                out.writeBoolean(installed);
            }
        } else if (fault instanceof Fault.Internal internal) {
            out.writeByte(Tag.INTERNAL);
            fields.writeText(internal.message());
        }
    }

    private void writeThrown(Fault.Thrown thrown) throws IOException {
        fields.writeText(thrown.className());
        fields.writeOptionalText(thrown.message());
        writeFrames(thrown.frames());
        out.writeBoolean(thrown.cause().isPresent());
        if (thrown.cause().isPresent()) {
            writeThrown(thrown.cause().get());
        }
    }

    private void writeFrames(List<StackTraceElement> frames) throws IOException {
        out.writeInt(frames.size());
        for (StackTraceElement frame : frames) {
            fields.writeText(frame.getClassName());
            fields.writeText(frame.getMethodName());
            fields.writeOptionalText(Optional.ofNullable(frame.getFileName()));
            out.writeInt(frame.getLineNumber());
        }
    }
}
