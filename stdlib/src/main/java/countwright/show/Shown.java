package countwright.show;

import java.util.UUID;
import org.jspecify.annotations.Nullable;

/** Something shown whose place can be given to another value later, also from a later cell. */
public final class Shown {

    private final Stage stage;
    private final String displayId = UUID.randomUUID().toString();

    private Shown(Stage stage) {
        this.stage = stage;
    }

    static Shown place(Stage stage, MimeBundle bundle) {
        Shown shown = new Shown(stage);
        stage.display(bundle, shown.displayId);
        return shown;
    }

    /** Shows a value in this place, instead of what stands there. */
    public void replaceWith(@Nullable Object value) {
        replaceWith(Show.bundleOf(value));
    }

    void replaceWith(MimeBundle bundle) {
        stage.update(bundle, displayId);
    }

    /** Returns nothing to read: as the result of a cell it would only repeat what is shown. */
    @Override
    public String toString() {
        return "shown above";
    }
}
