package countwright.kernel.cell;

import countwright.kernel.cell.CellOutcome.Failure;
import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.function.BiFunction;
import java.util.function.Supplier;

/**
 * Runs the cells of a lost session again, in order, to the last or to the first that fails; for {@code
 * Session.restore()}. What they print and show is not shown a second time; a line for each tells how far it has got.
 */
final class RestoreRun {

    /** Beyond this number of cells not every one gets a line. */
    private static final int MOST_LINES = 100;

    private final SucceededCells cells;
    private final CellListener listener;
    private final Supplier<Boolean> stopRequested;
    private final BiFunction<CellText, CellListener, CellOutcome> rerun;

    RestoreRun(
            SucceededCells cells,
            CellListener listener,
            Supplier<Boolean> stopRequested,
            BiFunction<CellText, CellListener, CellOutcome> rerun) {
        this.cells = cells;
        this.listener = listener;
        this.stopRequested = stopRequested;
        this.rerun = rerun;
    }

    /** Returns why it stopped before the last cell, if it did. */
    Optional<Failure> run() {
        int total = cells.lostCount();
        if (total == 0) {
            tell("There is nothing to restore: no cell that had succeeded has been lost since.");
            return Optional.empty();
        }
        if (cells.forgottenCount() > 0) {
            tell("The first " + cells.forgottenCount() + " cells of this session are too far back to be run again.");
        }
        long begun = System.nanoTime();
        int linesEvery = (total + MOST_LINES - 1) / MOST_LINES;
        for (int done = 0; done < total; done++) {
            CellText cell = cells.firstLost().orElseThrow();
            long start = System.nanoTime();
            Optional<Failure> failure = runOne(cell);
            if (failure.isPresent()) {
                tell("Restored " + done + " of " + total + " cells; stopped at " + cell.name() + ".");
                return Optional.of(stoppedAt(cell, failure.get()));
            }
            cells.firstLostRestored();
            if ((done + 1) % linesEvery == 0) {
                tell(cell.name() + " run again, " + secondsSince(start));
            }
        }
        tell("Restored " + total + (total == 1 ? " cell" : " cells") + ", " + secondsSince(begun) + ".");
        return Optional.empty();
    }

    private Optional<Failure> runOne(CellText cell) {
        if (stopRequested.get()) {
            String message = "Interrupted before " + cell.name() + " was run again.";
            return Optional.of(new Failure("Interrupted", message, List.of(message)));
        }
        return rerun.apply(cell, new Muted(listener)) instanceof Failure failure
                ? Optional.of(failure)
                : Optional.empty();
    }

    private static Failure stoppedAt(CellText cell, Failure failure) {
        List<String> lines = new ArrayList<>();
        lines.add("Session.restore() stopped at " + cell.name() + ", which failed when it was run again:");
        lines.addAll(failure.traceback());
        if (!failure.name().equals(WorkerExecution.LOST)) {
            lines.add("Put that right, then run Session.restore() again: it goes on with " + cell.name() + ".");
        }
        return new Failure(
                failure.name(), "Session.restore() stopped at " + cell.name() + ": " + failure.message(), lines);
    }

    private static String secondsSince(long start) {
        return String.format(Locale.ROOT, "%.2f s", (System.nanoTime() - start) / 1e9);
    }

    private void tell(String line) {
        listener.output(CellListener.Stream.OUT, line + "\n");
    }

    /** Passes on questions and comms only: what a cell showed stands in the notebook already. */
    private record Muted(CellListener listener) implements CellListener {

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
        public void comm(CommMessage message) {
            listener.comm(message);
        }

        @Override
        public void ask(InputRequest request) {
            listener.ask(request);
        }
    }
}
