package countwright.kernel.cell;

import countwright.kernel.cell.CellListener.InputRequest;
import countwright.kernel.worker.Worker;
import countwright.kernel.worker.WorkerListener;
import countwright.show.Stage;
import countwright.worker.Frame;
import java.nio.ByteBuffer;
import java.nio.CharBuffer;
import java.nio.charset.CharsetDecoder;
import java.nio.charset.CodingErrorAction;
import java.nio.charset.StandardCharsets;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.atomic.AtomicBoolean;
import org.jspecify.annotations.Nullable;

/**
 * Passes what the worker says to the listener of the cell that runs, or that ran last: a thread the cell left behind may
 * still print.
 */
final class CellEvents implements WorkerListener {

    private final CompletableFuture<Worker> worker = new CompletableFuture<>();
    private final Utf8Decoder out = new Utf8Decoder();
    private final Utf8Decoder err = new Utf8Decoder();
    private final AtomicBoolean restoreAsked = new AtomicBoolean();
    private volatile @Nullable CellListener listener;

    /** Says which worker questions are answered to. */
    void speaksFor(Worker speaker) {
        worker.complete(speaker);
    }

    /** Sends everything from here on to the listener of a cell that starts. */
    void listenWith(CellListener cellListener) {
        restoreAsked.set(false);
        listener = cellListener;
    }

    /** Returns whether the worker has asked to restore the lost session since the last call or the start of the cell. */
    boolean takeRestoreAsked() {
        return restoreAsked.getAndSet(false);
    }

    @Override
    public void said(Frame.ToKernel frame) {
        CellListener current = listener;
        if (current == null) {
            return;
        }
        if (frame instanceof Frame.RestoreAsked) {
            restoreAsked.set(true);
        } else if (frame instanceof Frame.Output output) {
            byte[] bytes = output.bytes().toArray();
            if (output.channel() == Frame.Channel.OUT) {
                say(current, CellListener.Stream.OUT, out.decode(bytes));
            } else {
                say(current, CellListener.Stream.ERR, err.decode(bytes));
            }
        } else if (frame instanceof Frame.Shown shown) {
            current.display(shown.bundle(), shown.displayId());
        } else if (frame instanceof Frame.Updated updated) {
            current.update(updated.bundle(), updated.displayId());
        } else if (frame instanceof Frame.Cleared cleared) {
            current.clear(cleared.when());
        } else if (frame instanceof Frame.Asked asked) {
            current.ask(new Question(asked, worker));
        }
    }

    @Override
    public void processSaid(String text) {
        CellListener current = listener;
        if (current != null) {
            say(current, CellListener.Stream.ERR, text);
        }
    }

    private static void say(CellListener listener, CellListener.Stream stream, String text) {
        if (!text.isEmpty()) {
            listener.output(stream, text);
        }
    }

    /** A question of the worker's, answered once. */
    private record Question(Frame.Asked asked, CompletableFuture<Worker> worker, AtomicBoolean answered)
            implements InputRequest {

        Question(Frame.Asked asked, CompletableFuture<Worker> worker) {
            this(asked, worker, new AtomicBoolean());
        }

        @Override
        public String prompt() {
            return asked.prompt();
        }

        @Override
        public Stage.Echo echo() {
            return asked.echo();
        }

        @Override
        public void answer(String line) {
            reply(new Frame.Answer(asked.question(), line));
        }

        @Override
        public void refuse(String reason) {
            reply(new Frame.Refuse(asked.question(), reason));
        }

        private void reply(Frame.ToWorker frame) {
            if (answered.compareAndSet(false, true)) {
                var unused = worker.thenAccept(speaker -> speaker.send(frame));
            }
        }
    }

    /** Decodes UTF-8 that arrives in pieces cut anywhere. */
    private static final class Utf8Decoder {

        private final CharsetDecoder decoder = StandardCharsets.UTF_8
                .newDecoder()
                .onMalformedInput(CodingErrorAction.REPLACE)
                .onUnmappableCharacter(CodingErrorAction.REPLACE);
        private byte[] rest = {};

        String decode(byte[] bytes) {
            ByteBuffer in = ByteBuffer.allocate(rest.length + bytes.length);
            in.put(rest).put(bytes).flip();
            CharBuffer text = CharBuffer.allocate(in.remaining() + 1);
            decoder.reset();
            decoder.decode(in, text, false);
            rest = new byte[in.remaining()];
            in.get(rest);
            return text.flip().toString();
        }
    }
}
