package countwright.kernel.cell;

import countwright.kernel.cell.CellListener.InputRequest;
import countwright.kernel.worker.Worker;
import countwright.kernel.worker.WorkerListener;
import countwright.show.Stage;
import countwright.worker.Fault;
import countwright.worker.Frame;
import java.nio.ByteBuffer;
import java.nio.CharBuffer;
import java.nio.charset.CharsetDecoder;
import java.nio.charset.CodingErrorAction;
import java.nio.charset.StandardCharsets;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.atomic.AtomicBoolean;
import org.jspecify.annotations.Nullable;

/**
 * Passes what the worker says to the listener of the cell that runs, or that ran last: a thread the cell left behind may
 * still print. What the handler of a comm message says goes to the listener of that message.
 */
final class CellEvents implements WorkerListener {

    private final CompletableFuture<Worker> worker = new CompletableFuture<>();
    private final AtomicBoolean restoreAsked = new AtomicBoolean();
    private final CellMap cells;
    private final Speaker cellSpeaker = new Speaker();
    private final Map<Long, Handling> handlings = new HashMap<>();
    private long lastNumber;
    private boolean lost;
    private volatile @Nullable CellListener listener;

    /** A comm message under way. */
    private record Handling(Speaker speaker, CellListener listener, Runnable handled) {}

    CellEvents(CellMap cells) {
        this.cells = cells;
    }

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

    /** Says who hears what comes of a comm message; returns its number, or nothing if the worker is lost. */
    Optional<Long> expect(CellListener handlerListener, Runnable handled) {
        synchronized (handlings) {
            if (!lost) {
                lastNumber++;
                handlings.put(lastNumber, new Handling(new Speaker(), handlerListener, handled));
                return Optional.of(lastNumber);
            }
        }
        handled.run();
        return Optional.empty();
    }

    /** Says that nothing more will come. */
    void lose() {
        List<Handling> left;
        synchronized (handlings) {
            lost = true;
            left = List.copyOf(handlings.values());
            handlings.clear();
        }
        left.forEach(handling -> handling.handled().run());
    }

    @Override
    public void said(Frame.ToKernel frame) {
        if (frame instanceof Frame.RestoreAsked) {
            restoreAsked.set(true);
        } else if (frame instanceof Frame.Aside aside) {
            handling(aside.number())
                    .ifPresent(handling -> handling.speaker().say(aside.event(), handling.listener(), worker));
        } else if (frame instanceof Frame.Handled handled) {
            Optional<Handling> ended = handling(handled.number());
            synchronized (handlings) {
                handlings.remove(handled.number());
            }
            ended.ifPresent(handling -> end(handling, handled.fault()));
        } else if (frame instanceof Frame.Event event) {
            CellListener current = listener;
            if (current != null) {
                cellSpeaker.say(event, current, worker);
            }
        }
    }

    private Optional<Handling> handling(long number) {
        synchronized (handlings) {
            return Optional.ofNullable(handlings.get(number));
        }
    }

    private void end(Handling handling, Optional<Fault> fault) {
        try {
            fault.ifPresent(
                    failure -> handling.listener().output(CellListener.Stream.ERR, HandlerReport.of(failure, cells)));
        } finally {
            handling.handled().run();
        }
    }

    @Override
    public void processSaid(String text) {
        CellListener current = listener;
        if (current != null && !text.isEmpty()) {
            current.output(CellListener.Stream.ERR, text);
        }
    }

    /** Something that speaks in frames, characters cut anywhere, to a listener. */
    private static final class Speaker {

        private final Utf8Decoder out = new Utf8Decoder();
        private final Utf8Decoder err = new Utf8Decoder();

        void say(Frame.Event event, CellListener current, CompletableFuture<Worker> worker) {
            if (event instanceof Frame.Output output) {
                boolean isOut = output.channel() == Frame.Channel.OUT;
                String text = (isOut ? out : err).decode(output.bytes().toArray());
                if (!text.isEmpty()) {
                    current.output(isOut ? CellListener.Stream.OUT : CellListener.Stream.ERR, text);
                }
            } else if (event instanceof Frame.Shown shown) {
                current.display(shown.bundle(), shown.displayId());
            } else if (event instanceof Frame.Updated updated) {
                current.update(updated.bundle(), updated.displayId());
            } else if (event instanceof Frame.Cleared cleared) {
                current.clear(cleared.when());
            } else if (event instanceof Frame.Asked asked) {
                current.ask(new Question(asked, worker));
            } else if (event instanceof Frame.Paged paged) {
                current.page(paged.bundle());
            } else if (event instanceof Frame.NextInput next) {
                current.nextInput(next.code());
            } else if (event instanceof Frame.CommSent sent) {
                current.comm(sent.message());
            } else if (event instanceof Frame.RestoreAsked) {
                current.output(
                        CellListener.Stream.ERR,
                        "Session.restore() can be called in a cell only, not where a comm message is handled.\n");
            }
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
