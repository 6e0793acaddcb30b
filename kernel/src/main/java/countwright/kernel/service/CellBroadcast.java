package countwright.kernel.service;

import countwright.kernel.cell.CellListener;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.Optional;
import tools.jackson.databind.node.ObjectNode;

/** Publishes what one cell says, under the request that started it. */
final class CellBroadcast implements CellListener {

    /** A flood goes in pieces, so that front ends show it as it comes and no message is large. */
    private static final int LONGEST_TEXT = 256 << 10;

    private final Request cell;
    private final Outbox outbox;
    private final InputDesk inputDesk;
    private final boolean allowStdin;

    CellBroadcast(Request cell, Outbox outbox, InputDesk inputDesk) {
        this.cell = cell;
        this.outbox = outbox;
        this.inputDesk = inputDesk;
        this.allowStdin = cell.content().flag("allow_stdin", false);
    }

    @Override
    public void output(Stream stream, String text) {
        String name = stream == Stream.OUT ? "stdout" : "stderr";
        for (int start = 0; start < text.length(); ) {
            int end = CodePoints.cut(text, start, LONGEST_TEXT);
            publish("stream", Replies.object().put("name", name).put("text", text.substring(start, end)));
            start = end;
        }
    }

    @Override
    public void display(MimeBundle bundle, Optional<String> displayId) {
        ObjectNode content = Replies.object();
        Replies.putBundle(content, bundle);
        ObjectNode transientPart = content.putObject("transient");
        displayId.ifPresent(id -> transientPart.put("display_id", id));
        publish("display_data", content);
    }

    @Override
    public void update(MimeBundle bundle, String displayId) {
        ObjectNode content = Replies.object();
        Replies.putBundle(content, bundle);
        content.putObject("transient").put("display_id", displayId);
        publish("update_display_data", content);
    }

    @Override
    public void clear(Stage.Clearing when) {
        publish("clear_output", Replies.object().put("wait", when == Stage.Clearing.BEFORE_NEXT));
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

    void input(String code, int executionCount) {
        publish("execute_input", Replies.object().put("code", code).put("execution_count", executionCount));
    }

    void result(MimeBundle bundle, int executionCount) {
        ObjectNode content = Replies.object().put("execution_count", executionCount);
        Replies.putBundle(content, bundle);
        publish("execute_result", content);
    }

    void error(ObjectNode error) {
        publish("error", error);
    }

    private void publish(String type, ObjectNode content) {
        outbox.publishWhenRoom(type, cell.header(), content);
    }
}
