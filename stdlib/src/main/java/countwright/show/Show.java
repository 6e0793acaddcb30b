package countwright.show;

import org.jspecify.annotations.Nullable;

/**
 * What a cell can do to the person in front of it: show, ask, clear. These methods are imported in every session.
 *
 * <p>All of it goes to the current {@link Stage}. A host puts its own in place with {@link #onto} before the first cell;
 * until then a plain terminal stands in, which prints text and reads lines. Safe to call from any thread.
 */
public final class Show {

    private static volatile Stage stage = new Terminal();

    private Show() {}

    /** Sends everything from now on to a stage; for the host of a session. */
    public static void onto(Stage newStage) {
        stage = newStage;
    }

    /** Returns the current stage, for things that show themselves more than once. */
    public static Stage stage() {
        return stage;
    }

    /**
     * Shows values below the running cell, one after the other, each in the richest form the front end can take. A single
     * array of objects counts as its elements; null shows as "null".
     */
    public static void show(@Nullable Object @Nullable ... values) {
        if (values == null) {
            stage.display(MimeBundle.text("null"));
            return;
        }
        for (Object value : values) {
            stage.display(Renderer.render(value).orElseGet(() -> MimeBundle.text("null")));
        }
    }

    /**
     * Asks for a line of text and waits for it.
     *
     * @throws IllegalStateException if nobody can be asked, as in a run without a front end
     */
    public static String ask(String prompt) {
        return stage.ask(prompt, Stage.Echo.VISIBLE);
    }

    /** Asks as {@link #ask} does, but does not show what is typed. */
    public static String askHidden(String prompt) {
        return stage.ask(prompt, Stage.Echo.HIDDEN);
    }

    /** Removes what the running cell has shown so far. */
    public static void clear() {
        stage.clear(Stage.Clearing.NOW);
    }
}
