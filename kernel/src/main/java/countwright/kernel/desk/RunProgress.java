package countwright.kernel.desk;

import java.time.Duration;
import java.util.List;

/** Hears how a run goes, on the thread that called it. Cells are counted from 1, over those that run. */
public interface RunProgress {

    /** A cell is about to run; the label is its first comment or line of code. */
    void started(int number, int total, String label);

    /** The cell has run to its end, or has failed as its author expects. */
    void finished(Duration duration);

    /** The cell has failed, and the run stops here. */
    void failed(Duration duration, List<String> errorLines);
}
