package countwright.kernel.service;

import countwright.kernel.cell.CellEngine;
import countwright.kernel.cell.CellListener;
import countwright.kernel.cell.CellOutcome;
import countwright.kernel.cell.CellOutcome.Failure;
import countwright.kernel.cell.CellOutcome.Success;
import countwright.kernel.cell.Completeness;
import countwright.kernel.cell.Completions;
import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.time.Duration;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.CopyOnWriteArrayList;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.LinkedBlockingQueue;

/** Plays the cells' side: the first word of a cell says what it does. */
final class FakeEngine implements CellEngine {

    final CountDownLatch closed = new CountDownLatch(1);

    /** What ends a blocked cell: "go" lets it end well, anything else is a failure of that name. */
    final BlockingQueue<String> release = new LinkedBlockingQueue<>();

    final List<Runnable> lossActions = new CopyOnWriteArrayList<>();

    @Override
    public CellOutcome evaluate(String code, int executionCount, CellListener listener) {
        String rest = code.substring(code.indexOf(' ') + 1);
        return switch (code.split(" ", 2)[0]) {
            case "print" -> {
                listener.output(CellListener.Stream.OUT, rest);
                listener.output(CellListener.Stream.ERR, "warned");
                yield new Success(Optional.empty());
            }
            case "value" -> new Success(Optional.of(MimeBundle.text(rest).withHtml("<b>" + rest + "</b>")));
            case "fail" -> new Failure("IllegalStateException", rest, List.of("IllegalStateException: " + rest));
            case "show" -> {
                MimeBundle picture = MimeBundle.text("a picture").with(MimeBundle.PNG, "AAAA", Map.of("width", 10));
                listener.display(picture, Optional.empty());
                listener.display(
                        MimeBundle.text("1 %").with("application/json", "{\"a\":[1]}", Map.of()), Optional.of("p"));
                listener.update(MimeBundle.text("2 %"), "p");
                listener.clear(Stage.Clearing.BEFORE_NEXT);
                listener.clear(Stage.Clearing.NOW);
                yield new Success(Optional.empty());
            }
            case "page" -> {
                listener.page(MimeBundle.text("first"));
                listener.page(MimeBundle.text(rest).withHtml("<b>" + rest + "</b>"));
                listener.nextInput("1 + 1");
                listener.nextInput("2 + 2");
                yield rest.equals("fail")
                        ? new Failure("IllegalStateException", rest, List.of(rest))
                        : new Success(Optional.empty());
            }
            case "comm" -> {
                listener.comm(new CommMessage(CommMessage.Kind.OPEN, rest, "lamp", Map.of("n", 1)));
                yield new Success(Optional.empty());
            }
            case "block" -> {
                listener.output(CellListener.Stream.OUT, "running");
                yield blocked();
            }
            case "ask" -> ask(rest, listener);
            case "crash" -> throw new IllegalStateException("the engine is broken");
            case "overflow" -> throw new StackOverflowError("the compiler is too deep in");
            default -> new Success(Optional.empty());
        };
    }

    private CellOutcome blocked() {
        try {
            String how = release.take();
            return how.equals("go") ? new Success(Optional.empty()) : new Failure(how, "stopped", List.of("stopped"));
        } catch (InterruptedException e) {
            return new Failure("Killed", "killed", List.of("killed"));
        }
    }

    private static CellOutcome ask(String prompt, CellListener listener) {
        BlockingQueue<CellOutcome> outcome = new LinkedBlockingQueue<>();
        listener.ask(new CellListener.InputRequest() {
            @Override
            public String prompt() {
                return prompt;
            }

            @Override
            public Stage.Echo echo() {
                return Stage.Echo.HIDDEN;
            }

            @Override
            public void answer(String line) {
                outcome.add(new Success(Optional.of(MimeBundle.text("got " + line))));
            }

            @Override
            public void refuse(String reason) {
                outcome.add(new Failure("NoInput", reason, List.of(reason)));
            }
        });
        try {
            return outcome.take();
        } catch (InterruptedException e) {
            return new Failure("Killed", "killed", List.of("killed"));
        }
    }

    @Override
    public Map<String, CellOutcome> evaluateExpressions(Map<String, String> expressions) {
        Map<String, CellOutcome> outcomes = new LinkedHashMap<>();
        expressions.forEach((name, code) -> outcomes.put(
                name,
                code.startsWith("bad")
                        ? new Failure("CompileError", "bad", List.of("bad"))
                        : new Success(Optional.of(MimeBundle.text("= " + code)))));
        return outcomes;
    }

    @Override
    public Completeness completeness(String code) {
        if (code.endsWith("{")) {
            return new Completeness.Incomplete("    ");
        }
        return code.startsWith(")") ? new Completeness.Invalid() : new Completeness.Complete();
    }

    /** Offers the two letters before the cursor, doubled. */
    @Override
    public Completions complete(String code, int cursor) {
        String before = code.substring(cursor - 2, cursor);
        return new Completions(cursor - 2, cursor, List.of(new Completions.Match(before + before, "variable")));
    }

    @Override
    public MimeBundle inspect(String code, int cursor, Detail detail) {
        return MimeBundle.text(code.startsWith("unknown") ? "" : code.substring(0, cursor) + " " + detail);
    }

    /** Echoes messages, closes comms of unknown targets and prints what it is told. */
    @Override
    public void receive(CommMessage message, CellListener listener, Runnable handled) {
        if (message.kind() == CommMessage.Kind.OPEN && !message.target().equals("echo")) {
            listener.comm(new CommMessage(CommMessage.Kind.CLOSE, message.commId(), "", Map.of()));
        } else if (message.kind() == CommMessage.Kind.MESSAGE) {
            listener.output(CellListener.Stream.OUT, "handling");
            listener.comm(new CommMessage(CommMessage.Kind.MESSAGE, message.commId(), "", message.data()));
        }
        handled.run();
    }

    @Override
    public void whenWorkerIsLost(Runnable action) {
        lossActions.add(action);
    }

    @Override
    public void interrupt() {
        release.add("Interrupted");
    }

    @Override
    public void close(Duration patience) {
        closed.countDown();
        release.add("WorkerLost");
    }
}
