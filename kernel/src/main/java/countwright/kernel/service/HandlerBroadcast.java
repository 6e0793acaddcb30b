package countwright.kernel.service;

import countwright.kernel.cell.CellListener;
import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.Optional;

/** Publishes what the handler of a comm message says, under that message. */
final class HandlerBroadcast implements CellListener {

    private final Request message;
    private final Publishing publishing;
    private final CommDesk comms;

    HandlerBroadcast(Request message, Outbox outbox, CommDesk comms) {
        this.message = message;
        this.publishing = new Publishing(message.header(), outbox);
        this.comms = comms;
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
    public void comm(CommMessage sent) {
        comms.publish(message.header(), sent);
    }

    @Override
    public void ask(InputRequest request) {
        request.refuse("The handler of a comm message cannot ask: there is no cell below which to ask.");
    }

    /** A pager comes with the reply to a cell, and here there is none: it is shown with the message instead. */
    @Override
    public void page(MimeBundle bundle) {
        publishing.display(bundle, Optional.empty());
    }

    @Override
    public void nextInput(String code) {
        publishing.output(Stream.ERR, "The handler of a comm message cannot set the next input; only a cell can.\n");
    }
}
