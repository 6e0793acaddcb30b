package countwright.kernel.desk;

import java.util.regex.Pattern;

/** Text as it was written for a terminal, turned into what a terminal would show in the end. */
final class TerminalText {

    /** Control sequences of ECMA-48: CSI ... final byte; OSC ... up to BEL or ST; and the two-character ones. */
    private static final Pattern CONTROL_SEQUENCE =
            Pattern.compile("\u001B(?:\\[[0-?]*[ -/]*[@-~]|\\][^\u0007\u001B]*(?:\u0007|\u001B\\\\)?|[@-Z\\\\^_])");

    private static final Pattern OTHER_CONTROL = Pattern.compile("[\\p{Cntrl}&&[^\n\t]]");

    private TerminalText() {}

    /** Removes control sequences and lets carriage returns and backspaces overwrite what stood there. */
    static String plain(String written) {
        String text = CONTROL_SEQUENCE.matcher(written).replaceAll("").replace("\r\n", "\n");
        if (text.indexOf('\r') >= 0 || text.indexOf('\b') >= 0) {
            StringBuilder all = new StringBuilder(text.length());
            for (String line : text.split("\n", -1)) {
                all.append(all.isEmpty() ? "" : "\n").append(overwritten(line));
            }
            // A first line that is empty leaves the builder empty, so its line end must be put back.
            text = text.startsWith("\n") ? "\n" + all : all.toString();
        }
        return OTHER_CONTROL.matcher(text).replaceAll("");
    }

    private static String overwritten(String line) {
        StringBuilder shown = new StringBuilder();
        int column = 0;
        for (int i = 0; i < line.length(); i++) {
            char c = line.charAt(i);
            if (c == '\r') {
                column = 0;
            } else if (c == '\b') {
                column = Math.max(0, column - 1);
            } else {
                if (column < shown.length()) {
                    shown.setCharAt(column, c);
                } else {
                    shown.append(c);
                }
                column++;
            }
        }
        return shown.toString();
    }
}
