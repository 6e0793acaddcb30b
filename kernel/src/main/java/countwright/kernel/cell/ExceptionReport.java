package countwright.kernel.cell;

import countwright.kernel.cell.CellMap.Location;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import jdk.jshell.EvalException;
import jdk.jshell.JShellException;
import jdk.jshell.UnresolvedReferenceException;

/** Tells of an exception in the user's own lines: what was thrown, from which cell and line, and because of what. */
final class ExceptionReport {

    private static final int MOST_PLACES = 8;
    private static final int LONGEST_LINE = 100;
    private static final String TOP_LEVEL = "do_it$";

    /** The method in which JShell computes a variable's first value: it knows the line, its caller only the first. */
    private static final String INITIALISER = "do_it$Aux";

    /** Exceptions of these packages carry a message of ours that says all; their class name adds nothing. */
    private static final String OUR_LIBRARY = "countwright.";

    private final CellMap cells;
    private final CompileReport compileReport;

    ExceptionReport(CellMap cells, CompileReport compileReport) {
        this.cells = cells;
        this.compileReport = compileReport;
    }

    CellOutcome.Failure of(JShellException exception) {
        List<String> lines = new ArrayList<>();
        if (exception instanceof UnresolvedReferenceException unresolved) {
            String name = unresolved.getSnippet().name();
            String message = "'" + name + "' cannot be run: it " + compileReport.whyUnusable(unresolved.getSnippet())
                    + " Put that right, then run this cell again.";
            lines.add(message);
            addPlaces(unresolved.getStackTrace(), lines);
            return new CellOutcome.Failure("Undeclared", message, lines);
        }
        EvalException thrown = (EvalException) exception;
        lines.add(headline(thrown));
        addPlaces(thrown.getStackTrace(), lines);
        addCauses(thrown, lines);
        return new CellOutcome.Failure(
                simpleName(thrown.getExceptionClassName()), messageOf(thrown).orElse(""), lines);
    }

    private void addCauses(EvalException thrown, List<String> lines) {
        Throwable cause = thrown.getCause();
        while (cause instanceof EvalException because) {
            lines.add("because of " + headline(because));
            addPlaces(because.getStackTrace(), lines);
            cause = because.getCause();
        }
    }

    private static String headline(EvalException thrown) {
        String name = simpleName(thrown.getExceptionClassName());
        Optional<String> message = messageOf(thrown);
        if (message.isPresent() && cameFromOurLibrary(thrown)) {
            return message.get();
        }
        return message.map(text -> name + ": " + text).orElse(name) + remedy(name);
    }

    private static String remedy(String exceptionName) {
        return switch (exceptionName) {
            case "StackOverflowError" ->
                "\nA method calls itself too deeply; look at the lines below for the call that never ends.";
            case "OutOfMemoryError" ->
                "\nThe worker's memory is full. Variables are kept; drop large ones by assigning null, or give the worker "
                        + "more, for example by setting COUNTWRIGHT_WORKER_OPTIONS=-Xmx8g before starting.";
            default -> "";
        };
    }

    private static boolean cameFromOurLibrary(EvalException thrown) {
        StackTraceElement[] frames = thrown.getStackTrace();
        boolean validation = thrown.getExceptionClassName().equals(IllegalArgumentException.class.getName())
                || thrown.getExceptionClassName().equals(IllegalStateException.class.getName())
                || thrown.getExceptionClassName().startsWith(OUR_LIBRARY);
        return validation && frames.length > 0 && frames[0].getClassName().startsWith(OUR_LIBRARY);
    }

    private void addPlaces(StackTraceElement[] frames, List<String> lines) {
        int told = 0;
        int left = 0;
        String last = "";
        boolean callsInitialiser = false;
        for (StackTraceElement frame : frames) {
            Optional<Location> location = cells.locate(frame);
            if (location.isEmpty() || callsInitialiser) {
                callsInitialiser = false;
                continue;
            }
            callsInitialiser = frame.getMethodName().startsWith(INITIALISER);
            String place = describe(location.get(), frame.getMethodName());
            if (place.equals(last)) {
                left++;
                continue;
            }
            last = place;
            if (told < MOST_PLACES) {
                lines.add(place);
                told++;
            } else {
                left++;
            }
        }
        if (left > 0) {
            lines.add("  ... and " + left + " more such calls");
        }
    }

    private static String describe(Location location, String methodName) {
        String where = "  in " + location.cell().name() + ", line " + location.line();
        if (methodName.startsWith("lambda$")) {
            where += ", in a lambda";
        } else if (!methodName.startsWith(TOP_LEVEL) && !methodName.isEmpty()) {
            where += ", in " + methodName;
        }
        String source = location.cell().line(location.line()).strip();
        if (source.length() > LONGEST_LINE) {
            source = source.substring(0, LONGEST_LINE) + " ...";
        }
        return source.isEmpty() ? where : where + ":   " + source;
    }

    /** Returns the message without the classes that JShell wraps around the names of a cell. */
    private static Optional<String> messageOf(EvalException thrown) {
        return Optional.ofNullable(thrown.getMessage()).map(UserNames::of).filter(message -> !message.isBlank());
    }

    private static String simpleName(String className) {
        return className.substring(Math.max(className.lastIndexOf('.'), className.lastIndexOf('$')) + 1);
    }
}
