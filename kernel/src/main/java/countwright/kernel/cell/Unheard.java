package countwright.kernel.cell;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.Optional;

/** Hears nothing: stands in until there is a cell. */
final class Unheard implements CellListener {

    @Override
    public void output(Stream stream, String text) {}

    @Override
    public void display(MimeBundle bundle, Optional<String> displayId) {}

    @Override
    public void update(MimeBundle bundle, String displayId) {}

    @Override
    public void clear(Stage.Clearing when) {}

    @Override
    public void page(MimeBundle bundle) {}

    @Override
    public void nextInput(String code) {}

    @Override
    public void comm(CommMessage message) {}

    @Override
    public void ask(InputRequest request) {
        request.refuse("no cell has run yet");
    }
}
