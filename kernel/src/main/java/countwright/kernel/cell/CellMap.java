package countwright.kernel.cell;

import java.util.Map;
import java.util.Optional;
import java.util.concurrent.ConcurrentHashMap;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import jdk.jshell.Snippet;

/** Remembers which cell each snippet came from, so that errors can point at the line the user wrote. */
final class CellMap {

    private static final Pattern SNIPPET_CLASS = Pattern.compile("REPL\\.\\$JShell\\$([0-9]+)");

    /** A cell and the line of it, counted from 1, on which the snippet starts. */
    private record Origin(CellText cell, int firstLine) {}

    /** A line of a cell. */
    record Location(CellText cell, int line) {}

    private final Map<String, Origin> origins = new ConcurrentHashMap<>();

    void remember(Snippet snippet, CellText cell, int start) {
        origins.put(snippet.id(), new Origin(cell, cell.placeOf(start).line()));
    }

    /** Returns the cell that a snippet came from. */
    Optional<CellText> cellOf(Snippet snippet) {
        return Optional.ofNullable(origins.get(snippet.id())).map(Origin::cell);
    }

    /** Returns the cell that a frame of the worker's own stack belongs to; its class is named after the snippet. */
    Optional<CellText> cellOf(StackTraceElement workerFrame) {
        Matcher snippet = SNIPPET_CLASS.matcher(workerFrame.getClassName());
        return snippet.lookingAt()
                ? Optional.ofNullable(origins.get(snippet.group(1))).map(Origin::cell)
                : Optional.empty();
    }

    /** Returns where a stack frame is in the user's cells; JShell names the file of such a frame after its snippet. */
    Optional<Location> locate(StackTraceElement frame) {
        String file = frame.getFileName();
        if (file == null || !file.startsWith("#")) {
            return Optional.empty();
        }
        Origin origin = origins.get(file.substring(1));
        if (origin == null) {
            return Optional.empty();
        }
        return Optional.of(new Location(origin.cell(), origin.firstLine() + Math.max(0, frame.getLineNumber() - 1)));
    }
}
