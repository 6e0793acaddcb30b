package countwright.kernel.cell;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.Optional;

/** Passes everything on but questions: an expression is evaluated for a front end, not for a person. */
record WithoutQuestions(CellListener listener) implements CellListener {

    @Override
    public void output(Stream stream, String text) {
        listener.output(stream, text);
    }

    @Override
    public void display(MimeBundle bundle, Optional<String> displayId) {
        listener.display(bundle, displayId);
    }

    @Override
    public void update(MimeBundle bundle, String displayId) {
        listener.update(bundle, displayId);
    }

    @Override
    public void clear(Stage.Clearing when) {
        listener.clear(when);
    }

    @Override
    public void page(MimeBundle bundle) {
        listener.page(bundle);
    }

    @Override
    public void nextInput(String code) {
        listener.nextInput(code);
    }

    @Override
    public void comm(CommMessage message) {
        listener.comm(message);
    }

    @Override
    public boolean isStopRequested() {
        return listener.isStopRequested();
    }

    @Override
    public void ask(InputRequest request) {
        request.refuse("an expression evaluated for the front end cannot ask for input");
    }
}
