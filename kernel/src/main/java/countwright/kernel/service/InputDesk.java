package countwright.kernel.service;

import countwright.kernel.cell.CellListener.InputRequest;
import countwright.kernel.wire.Envelope;
import countwright.kernel.wire.Header;
import countwright.kernel.wire.Message;
import countwright.kernel.wire.Route;
import countwright.show.Stage;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Optional;
import tools.jackson.databind.JsonNode;

/**
 * Carries a cell's questions to the front end that runs it, one at a time, and the answers back. Nothing waits here: the
 * worker does. An answer counts only if it comes from the front end that was asked and, where it names the question,
 * names the open one; a late answer to a cancelled question is dropped. Used by any thread.
 */
final class InputDesk {

    private static final Logger LOG = System.getLogger(InputDesk.class.getName());

    private final Outbox outbox;

    /** Questions in order; only the first has been sent. */
    private final Deque<Question> open = new ArrayDeque<>();

    private Optional<Header> sent = Optional.empty();

    private record Question(Request cell, InputRequest input) {}

    InputDesk(Outbox outbox) {
        this.outbox = outbox;
    }

    synchronized void ask(Request cell, InputRequest input) {
        open.addLast(new Question(cell, input));
        if (open.size() == 1) {
            sendFirst();
        }
    }

    /** Takes what came in on stdin. */
    void deliver(Envelope envelope) {
        Message message = envelope.message();
        JsonNode value = message.content().path("value");
        if (!message.type().equals("input_reply") || !value.isString()) {
            LOG.log(Level.WARNING, "Ignored a message on stdin: it is no input_reply with text in content.value.");
            return;
        }
        Optional<InputRequest> answered = takeAnswered(envelope.route(), message);
        if (answered.isEmpty()) {
            LOG.log(Level.WARNING, "Ignored an input_reply: no question to that front end is open.");
        }
        answered.ifPresent(input -> input.answer(value.stringValue()));
    }

    /** Refuses all open questions. */
    void cancel(String reason) {
        List<Question> cancelled;
        synchronized (this) {
            cancelled = new ArrayList<>(open);
            open.clear();
            sent = Optional.empty();
        }
        cancelled.forEach(question -> question.input().refuse(reason));
    }

    private synchronized Optional<InputRequest> takeAnswered(Route from, Message reply) {
        Question first = open.peekFirst();
        if (first == null || !first.cell().route().equals(from)) {
            return Optional.empty();
        }
        // The reference client sends no parent with its answer; front ends in a browser do.
        boolean namesAnother =
                reply.parent().isPresent() && !sent.filter(reply::isCausedBy).isPresent();
        if (namesAnother) {
            return Optional.empty();
        }
        open.removeFirst();
        sent = Optional.empty();
        if (!open.isEmpty()) {
            sendFirst();
        }
        return Optional.of(first.input());
    }

    private void sendFirst() {
        Question first = open.getFirst();
        var content = Replies.object()
                .put("prompt", first.input().prompt())
                .put("password", first.input().echo() == Stage.Echo.HIDDEN);
        Request cell = first.cell();
        sent = Optional.of(outbox.ask(cell.route(), cell.header(), content, () -> undeliverable(first)));
    }

    /** Told late, the question may be over, and the next cell's must not suffer for it. */
    private void undeliverable(Question question) {
        boolean isOpen;
        synchronized (this) {
            isOpen = question.equals(open.peekFirst());
        }
        if (isOpen) {
            cancel("The front end does not listen for questions on stdin, so this one cannot be asked.");
        }
    }
}
