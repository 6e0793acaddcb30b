package countwright.worker;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.EOFException;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;

class FrameStreamTest {

    private static final StackTraceElement PLACE = new StackTraceElement("REPL.$JShell$1", "do_it$", "#1", 7);
    private static final StackTraceElement NATIVE = new StackTraceElement("java.lang.Object", "wait", null, -2);

    static List<Frame> frames() {
        MimeBundle picture = MimeBundle.text("two é 🚋")
                .withPng(new byte[] {1, 2, 3}, 720, 440, "a chart")
                .with("application/x-test", "{}", Map.of("ratio", 1.5, "expanded", true));
        Fault.Thrown cause = new Fault.Thrown("java.io.IOException", Optional.empty(), List.of(), Optional.empty());
        CommMessage comm = new CommMessage(
                CommMessage.Kind.OPEN,
                "id",
                "lamp",
                Map.of("all", List.of(1L, 2.5, "x", true, Optional.empty(), Map.of("k", "v"))));
        return List.of(
                new Frame.Load(List.of(new CompiledClass("REPL.$JShell$1", Bytes.of(new byte[] {-54, -2})))),
                new Frame.Load(List.of()),
                new Frame.Invoke(
                        List.of(new CompiledClass("REPL.$JShell$1", Bytes.of(new byte[] {-54, -2}))),
                        "REPL.$JShell$1",
                        "do_it$",
                        Frame.Want.BUNDLE),
                new Frame.Invoke(List.of(), "REPL.$JShell$1", "do_it$", Frame.Want.NOTHING),
                new Frame.Release("REPL.$JShell$1", "$1"),
                new Frame.ReadVariable("REPL.$JShell$1", "x"),
                new Frame.AddToClassPath("/a path/with blanks.jar"),
                new Frame.Interrupt(),
                new Frame.Answer(3, "Zürich"),
                new Frame.Refuse(4, "nobody there"),
                new Frame.Leave(),
                new Frame.Ready("token", 1L << 40),
                new Frame.Done("", Optional.empty()),
                new Frame.Done("text", Optional.of(picture)),
                new Frame.Failed(new Fault.Thrown(
                        "java.lang.IllegalStateException",
                        Optional.of("outer"),
                        List.of(PLACE, NATIVE),
                        Optional.of(cause))),
                new Frame.Failed(new Fault.Unresolved(12, List.of(PLACE))),
                new Frame.Failed(new Fault.Stopped()),
                new Frame.Failed(new Fault.NotInstalled("no", List.of(true, false))),
                new Frame.Failed(new Fault.Internal("broken")),
                new Frame.Output(Frame.Channel.ERR, Bytes.of("caf\u00e9".getBytes(StandardCharsets.UTF_8))),
                new Frame.Shown(picture, Optional.of("id")),
                new Frame.Shown(MimeBundle.text(""), Optional.empty()),
                new Frame.Updated(picture, "id"),
                new Frame.Cleared(Stage.Clearing.BEFORE_NEXT),
                new Frame.Asked(9, "name? ", Stage.Echo.HIDDEN),
                new Frame.Paged(picture),
                new Frame.NextInput("1 + 1"),
                new Frame.CommReceived(7, comm),
                new Frame.CommSent(comm),
                new Frame.InterruptHandler(),
                new Frame.Aside(7, new Frame.CommSent(comm)),
                new Frame.Handled(7, Optional.empty()),
                new Frame.Handled(8, Optional.of(new Fault.Internal("broken"))));
    }

    @ParameterizedTest
    @MethodSource("frames")
    void frame_writtenAndRead_isTheSame(Frame frame) throws IOException {
        assertThat(reading(encoded(frame)).read().toString()).isEqualTo(frame.toString());
    }

    @ParameterizedTest
    @MethodSource("frames")
    void frame_cutAnywhere_isRefusedAndNeverMisread(Frame frame) throws IOException {
        byte[] whole = encoded(frame);
        for (int length = 0; length < whole.length; length++) {
            byte[] cut = java.util.Arrays.copyOf(whole, length);
            assertThatThrownBy(() -> reading(cut).read()).isInstanceOf(IOException.class);
        }
    }

    @Test
    void frames_inSequence_keepTheirOrder() throws IOException {
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        FrameStream writer = new FrameStream(InputStream.nullInputStream(), out);
        for (Frame frame : frames()) {
            writer.write(frame);
        }
        writer.flush();
        FrameStream reader = reading(out.toByteArray());
        for (Frame frame : frames()) {
            assertThat(reader.read().getClass()).isEqualTo(frame.getClass());
        }
        assertThatThrownBy(reader::read).isInstanceOf(EOFException.class);
    }

    /** Whatever a damaged worker sends, the reader ends with an I/O error or a frame: no other exception, no huge array. */
    @Test
    void noise_isReadAsFramesOrRefused() throws IOException {
        Random random = new Random(20261201);
        for (int round = 0; round < 20_000; round++) {
            byte[] noise = encoded(frames().get(random.nextInt(frames().size())));
            for (int k = 0; k <= random.nextInt(4); k++) {
                noise[random.nextInt(noise.length)] = (byte) random.nextInt(256);
            }
            readToTheEnd(reading(noise));
        }
    }

    private static void readToTheEnd(FrameStream stream) {
        try {
            while (true) {
                assertThat(stream.read()).isNotNull();
            }
        } catch (IOException expected) {
            assertThat(expected).isNotNull();
        }
    }

    private static byte[] encoded(Frame frame) throws IOException {
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        FrameStream stream = new FrameStream(InputStream.nullInputStream(), out);
        stream.write(frame);
        stream.flush();
        return out.toByteArray();
    }

    private static FrameStream reading(byte[] bytes) {
        return new FrameStream(new ByteArrayInputStream(bytes), OutputStream.nullOutputStream());
    }
}
