package countwright.kernel.cell;

import countwright.worker.Fault;
import java.util.Optional;

/** Tells of the failure of a comm handler: what was thrown, in which cells, and because of what. */
final class HandlerReport {

    private static final int MOST_PLACES = 8;

    private HandlerReport() {}

    /** Returns lines that end with a line break. */
    static String of(Fault fault, CellMap cells) {
        StringBuilder report = new StringBuilder("A comm handler failed. ");
        if (fault instanceof Fault.Thrown thrown) {
            addThrown(thrown, cells, report);
        } else if (fault instanceof Fault.Internal internal) {
            report.append(internal.message()).append(".\n");
        } else {
            report.append("It uses something that is not declared.\n");
        }
        return report.toString();
    }

    private static void addThrown(Fault.Thrown thrown, CellMap cells, StringBuilder report) {
        String name = thrown.className();
        report.append(name.substring(Math.max(name.lastIndexOf('.'), name.lastIndexOf('$')) + 1));
        thrown.message()
                .map(UserNames::of)
                .ifPresent(message -> report.append(": ").append(message));
        report.append('\n');
        // The lines are those of the class that JShell made of the cell, which mean nothing to its author.
        thrown.frames().stream()
                .map(cells::cellOf)
                .flatMap(Optional::stream)
                .distinct()
                .limit(MOST_PLACES)
                .forEach(cell -> report.append("  in ").append(cell.name()).append('\n'));
        thrown.cause().ifPresent(cause -> {
            report.append("because of ");
            addThrown(cause, cells, report);
        });
    }
}
