package countwright.kernel.cell;

import java.util.Iterator;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.ConcurrentHashMap;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import jdk.jshell.Snippet;
import jdk.jshell.SourceCodeAnalysis.SnippetWrapper;

/** Remembers which cell each snippet came from, so that errors can point at the line the user wrote. */
final class CellMap {

    private static final Pattern SNIPPET_CLASS = Pattern.compile("REPL\\.\\$JShell\\$([0-9]+)");

    /** A cell and the line of it, counted from 1, on which the snippet starts. */
    private record Origin(CellText cell, int firstLine) {}

    /** A line of a cell. */
    record Location(CellText cell, int line) {}

    /** A cell and what is to be added to a line of a compiled source to get the line of the cell. */
    private record Remainder(CellText cell, int shift) {}

    private static final long MOST_CHARACTERS = 8 << 20;
    private static final long ENTRY_CHARACTERS = 200;

    private static final Pattern COMPILED = Pattern.compile("REPL\\.\\$JShell\\$\\w+");

    private final Map<String, Origin> origins = new ConcurrentHashMap<>();

    /** The oldest go first; a late trace then lacks its line. */
    private final Map<String, Remainder> remainders = new LinkedHashMap<>();

    private long remainingCharacters;

    void remember(Snippet snippet, CellText cell, int start) {
        origins.put(snippet.id(), new Origin(cell, cell.placeOf(start).line()));
    }

    /**
     * Forgets a snippet but for its lines. JShell is about to forget it as a whole; a lambda that it left behind may still
     * fail later, and its stack frames then bear the lines of the source that was compiled.
     */
    void forgetAllButLines(Snippet snippet, SnippetWrapper wrapper) {
        Origin origin = origins.remove(snippet.id());
        if (origin != null) {
            int firstCompiled = 1;
            int start = wrapper.sourceToWrappedPosition(0);
            String compiled = wrapper.wrapped();
            for (int i = 0; i < Math.min(start, compiled.length()); i++) {
                firstCompiled += compiled.charAt(i) == '\n' ? 1 : 0;
            }
            keep(wrapper.fullClassName(), new Remainder(origin.cell(), origin.firstLine() - firstCompiled));
        }
    }

    /** Forgets a snippet that has left nothing behind. */
    void forget(Snippet snippet) {
        origins.remove(snippet.id());
    }

    private void keep(String className, Remainder remainder) {
        synchronized (remainders) {
            remainders.put(className, remainder);
            remainingCharacters += size(remainder);
            Iterator<Remainder> oldest = remainders.values().iterator();
            while (remainingCharacters > MOST_CHARACTERS && oldest.hasNext()) {
                remainingCharacters -= size(oldest.next());
                oldest.remove();
            }
        }
    }

    private Optional<Remainder> remainder(String className) {
        synchronized (remainders) {
            return Optional.ofNullable(remainders.get(className));
        }
    }

    /** The text counts for each piece of its cell: more than it takes, never less. */
    private static long size(Remainder remainder) {
        return ENTRY_CHARACTERS + remainder.cell().code().length();
    }

    /** Returns the cell that a snippet came from. */
    Optional<CellText> cellOf(Snippet snippet) {
        return Optional.ofNullable(origins.get(snippet.id())).map(Origin::cell);
    }

    /** Returns the cell that a frame of the worker's own stack belongs to; its class is named after the snippet. */
    Optional<CellText> cellOf(StackTraceElement workerFrame) {
        Matcher snippet = SNIPPET_CLASS.matcher(workerFrame.getClassName());
        if (!snippet.lookingAt()) {
            return Optional.empty();
        }
        return Optional.ofNullable(origins.get(snippet.group(1)))
                .map(Origin::cell)
                .or(() -> locateForgotten(workerFrame).map(Location::cell));
    }

    /** Returns where a stack frame is in the user's cells; JShell names the file of such a frame after its snippet. */
    Optional<Location> locate(StackTraceElement frame) {
        String file = frame.getFileName();
        if (file == null || !file.startsWith("#")) {
            return locateForgotten(frame);
        }
        Origin origin = origins.get(file.substring(1));
        if (origin == null) {
            return Optional.empty();
        }
        return Optional.of(new Location(origin.cell(), origin.firstLine() + Math.max(0, frame.getLineNumber() - 1)));
    }

    private Optional<Location> locateForgotten(StackTraceElement frame) {
        Matcher compiled = COMPILED.matcher(frame.getClassName());
        return compiled.lookingAt()
                ? remainder(compiled.group())
                        .map(left -> new Location(left.cell(), Math.max(1, frame.getLineNumber() + left.shift())))
                : Optional.empty();
    }
}
