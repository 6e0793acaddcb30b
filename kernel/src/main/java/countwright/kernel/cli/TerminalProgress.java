package countwright.kernel.cli;

import countwright.kernel.desk.RunProgress;
import java.io.PrintWriter;
import java.time.Duration;
import java.util.List;
import java.util.Locale;

/** One line a cell: {@code [ 3/14] Look at the rates ............ 0.4 s}. */
final class TerminalProgress implements RunProgress {

    private static final int WIDTH = 68;

    private final PrintWriter out;
    private final PrintWriter err;
    private final Ink ink;
    private int number;
    private int total;

    TerminalProgress(PrintWriter out, PrintWriter err, Ink ink) {
        this.out = out;
        this.err = err;
        this.ink = ink;
    }

    /** Whether lines may carry colour. */
    enum Ink {
        PLAIN,
        COLOURED;

        /** The launcher says whether output goes to a terminal; NO_COLOR is the user's word against colour. */
        static Ink ofThisTerminal() {
            boolean terminal = Boolean.getBoolean("countwright.terminal");
            String refusal = System.getenv("NO_COLOR");
            return terminal && (refusal == null || refusal.isEmpty()) ? COLOURED : PLAIN;
        }

        private String bad(String text) {
            return this == COLOURED ? "\u001B[31m" + text + "\u001B[0m" : text;
        }

        private String soft(String text) {
            return this == COLOURED ? "\u001B[2m" + text + "\u001B[0m" : text;
        }
    }

    @Override
    public void started(int startedNumber, int ofTotal, String label) {
        number = startedNumber;
        total = ofTotal;
        int digits = Integer.toString(total).length();
        String counter = String.format(Locale.ROOT, "[%" + digits + "d/%d] ", number, total);
        int room = WIDTH - counter.length() - 4;
        String shortened = label.length() <= room ? label : label.substring(0, room - 3) + "...";
        String dots = ".".repeat(WIDTH - counter.length() - shortened.length() - 1);
        out.print(counter + shortened + " " + ink.soft(dots) + " ");
        out.flush();
    }

    @Override
    public void finished(Duration duration) {
        out.println(seconds(duration));
        out.flush();
    }

    @Override
    public void failed(Duration duration, List<String> errorLines) {
        out.println(ink.bad("failed") + " after " + seconds(duration));
        out.flush();
        err.println();
        err.println(ink.bad("Cell " + number + " of " + total + " failed:"));
        errorLines.forEach(line -> err.println("  " + line));
        err.println();
        err.println(
                number == total
                        ? "The output until then is written."
                        : "The run stopped here; the output until then is written.");
        err.flush();
    }

    private static String seconds(Duration duration) {
        return String.format(Locale.ROOT, "%.1f s", duration.toMillis() / 1000.0);
    }
}
