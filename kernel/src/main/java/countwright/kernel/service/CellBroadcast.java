package countwright.kernel.service;

import countwright.kernel.cell.CellListener;
import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.Optional;
import java.util.function.BooleanSupplier;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.ObjectNode;

/** Publishes what one cell says, under the request that started it, and keeps what its reply is to carry. */
final class CellBroadcast implements CellListener {

    private final Request cell;
    private final Publishing publishing;
    private final InputDesk inputDesk;
    private final CommDesk comms;
    private final BooleanSupplier stopRequested;
    private final boolean allowStdin;
    private Optional<MimeBundle> paged = Optional.empty();
    private Optional<String> nextInput = Optional.empty();

    CellBroadcast(Request cell, Outbox outbox, InputDesk inputDesk, CommDesk comms, BooleanSupplier stopRequested) {
        this.cell = cell;
        this.publishing = new Publishing(cell.header(), outbox);
        this.inputDesk = inputDesk;
        this.comms = comms;
        this.stopRequested = stopRequested;
        this.allowStdin = cell.content().flag("allow_stdin", false);
    }

    @Override
    public void output(Stream stream, String text) {
        publishing.output(stream, text);
    }

    @Override
    public void display(MimeBundle bundle, Optional<String> displayId) {
        publishing.display(bundle, displayId);
    }

    @Override
    public void update(MimeBundle bundle, String displayId) {
        publishing.update(bundle, displayId);
    }

    @Override
    public void clear(Stage.Clearing when) {
        publishing.clear(when);
    }

    @Override
    public void comm(CommMessage message) {
        comms.publish(cell.header(), message);
    }

    @Override
    public synchronized void page(MimeBundle bundle) {
        paged = Optional.of(bundle);
    }

    @Override
    public synchronized void nextInput(String code) {
        nextInput = Optional.of(code);
    }

    @Override
    public boolean isStopRequested() {
        return stopRequested.getAsBoolean();
    }

    @Override
    public void ask(InputRequest request) {
        if (allowStdin) {
            inputDesk.ask(cell, request);
        } else {
            request.refuse("This front end takes no input while a cell runs (it said allow_stdin = false)."
                    + " Put the value into a variable instead, or run the cell where questions can be answered.");
        }
    }

    /** Returns the payload of a reply that says ok: one entry a source at most, the last that the cell gave. */
    synchronized ArrayNode payload() {
        ArrayNode payload = Replies.object().putArray("payload");
        paged.ifPresent(bundle -> {
            ObjectNode page = payload.addObject().put("source", "page");
            Replies.putData(page, bundle);
            page.put("start", 0);
        });
        nextInput.ifPresent(code -> payload.addObject()
                .put("source", "set_next_input")
                .put("text", code)
                .put("replace", false));
        return payload;
    }

    void input(String code, int executionCount) {
        publishing.publish("execute_input", Replies.object().put("code", code).put("execution_count", executionCount));
    }

    void result(MimeBundle bundle, int executionCount) {
        ObjectNode content = Replies.object().put("execution_count", executionCount);
        Replies.putBundle(content, bundle);
        publishing.publish("execute_result", content);
    }

    void error(ObjectNode error) {
        publishing.publish("error", error);
    }
}
