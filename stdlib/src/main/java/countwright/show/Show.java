package countwright.show;

import java.util.Collection;
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
            stage.display(bundleOf(value));
        }
    }

    /** Shows a value as {@link #show} does, in a place where another can take its place later. */
    public static Shown showReplaceable(@Nullable Object value) {
        return Shown.place(stage, bundleOf(value));
    }

    /**
     * Shows a value in the front end's pager, a place beside the cells, once the running cell has ended without error.
     * Of several in one cell the last is shown. Front ends without a pager show it below the cell or not at all.
     */
    public static void page(@Nullable Object value) {
        stage.page(bundleOf(value));
    }

    /**
     * Puts code into a new cell below, for the person to look at and run, once the running cell has ended without error.
     * Of several in one cell the last counts. Many front ends offer this in consoles only.
     */
    public static void nextInput(String code) {
        stage.nextInput(code);
    }

    /**
     * Shows how far a long piece of work has come, in one place below the cell.
     *
     * @param label what is done, in a word or two
     * @param total how many steps there are, positive
     */
    public static Progress progress(String label, long total) {
        return Progress.of(label, total, stage);
    }

    /**
     * Returns the items as they are, and shows how many have been taken: {@code for (var site : progress("sites",
     * sites)) ...}
     */
    public static <T> Iterable<T> progress(String label, Collection<T> items) {
        return () -> Progress.over(label, items, stage);
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

    /** Removes what the running cell has shown so far, at the moment it shows the next thing, so that nothing flickers. */
    public static void clearBeforeNext() {
        stage.clear(Stage.Clearing.BEFORE_NEXT);
    }

    static MimeBundle bundleOf(@Nullable Object value) {
        return Renderer.render(value).orElseGet(() -> MimeBundle.text("null"));
    }
}
