package countwright.kernel.cell;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import jdk.jshell.SourceCodeAnalysis;
import jdk.jshell.SourceCodeAnalysis.CompletionInfo;

/** Cuts a cell into the pieces that JShell takes one at a time. */
final class CellSplitter {

    /**
     * A statement, expression or declaration of a cell.
     *
     * @param start its position in the cell, in UTF-16 units, behind leading blanks and comments: JShell counts lines from there
     * @param end the position behind it in the cell
     * @param source its text, with a semicolon added where one may be left out
     * @param whole whether it is complete as it stands
     * @param showsValue whether it lacks the closing semicolon that keeps a value from being shown
     */
    record Piece(int start, int end, String source, boolean whole, boolean showsValue) {}

    private CellSplitter() {}

    static List<Piece> split(String code, SourceCodeAnalysis analysis) {
        List<Piece> pieces = new ArrayList<>();
        String remaining = code;
        while (!remaining.isBlank()) {
            CompletionInfo info = analysis.analyzeCompletion(remaining);
            int start = code.length() - remaining.length();
            switch (info.completeness()) {
                case EMPTY -> {
                    return pieces;
                }
                case COMPLETE, COMPLETE_WITH_SEMI -> {
                    int end = code.length() - info.remaining().length();
                    int lead = leadLength(info.source());
                    boolean showsValue = !endsWithSemicolon(code.substring(start, end));
                    pieces.add(new Piece(start + lead, end, info.source().substring(lead), true, showsValue));
                    if (info.remaining().length() >= remaining.length()) {
                        return pieces;
                    }
                    remaining = info.remaining();
                }
                case CONSIDERED_INCOMPLETE, DEFINITELY_INCOMPLETE, UNKNOWN -> {
                    int lead = leadLength(remaining);
                    pieces.add(new Piece(start + lead, code.length(), remaining.substring(lead), false, false));
                    return pieces;
                }
            }
        }
        return pieces;
    }

    /** Returns how many characters of blanks and comments stand before the code. */
    private static int leadLength(String source) {
        int i = 0;
        while (i < source.length()) {
            if (source.startsWith("//", i)) {
                i = endOf(source, "\n", i + 2);
            } else if (source.startsWith("/*", i)) {
                i = endOf(source, "*/", i + 2);
            } else if (Character.isWhitespace(source.charAt(i))) {
                i++;
            } else {
                return i;
            }
        }
        return 0;
    }

    /** Tells whether the last thing that is neither blank nor comment is a semicolon. */
    static boolean endsWithSemicolon(String source) {
        char last = ' ';
        for (int i = 0; i < source.length(); i = next(source, i)) {
            if (!isComment(source, i) && !Character.isWhitespace(source.charAt(i))) {
                last = source.charAt(i);
            }
        }
        return last == ';';
    }

    /** Tells whether each bracket closes one that was opened before it, and none stays open. */
    static boolean isBalanced(String source) {
        Deque<Character> open = new ArrayDeque<>();
        for (int i = 0; i < source.length(); i = next(source, i)) {
            char c = source.charAt(i);
            switch (c) {
                case '(' -> open.push(')');
                case '[' -> open.push(']');
                case '{' -> open.push('}');
                case ')', ']', '}' -> {
                    if (open.isEmpty() || open.pop() != c) {
                        return false;
                    }
                }
                default -> {}
            }
        }
        return open.isEmpty();
    }

    private static boolean isComment(String source, int i) {
        return source.startsWith("//", i) || source.startsWith("/*", i);
    }

    /** Returns the position behind what starts at a position: a comment, a text, or a single character. */
    private static int next(String source, int i) {
        char c = source.charAt(i);
        if (source.startsWith("//", i)) {
            return endOf(source, "\n", i + 2);
        }
        if (source.startsWith("/*", i)) {
            return endOf(source, "*/", i + 2);
        }
        if (source.startsWith("\"\"\"", i)) {
            return endOfQuoted(source, "\"\"\"", i + 3);
        }
        return c == '"' || c == '\'' ? endOfQuoted(source, String.valueOf(c), i + 1) : i + 1;
    }

    private static int endOf(String source, String mark, int from) {
        int found = source.indexOf(mark, from);
        return found < 0 ? source.length() : found + mark.length();
    }

    private static int endOfQuoted(String source, String quote, int from) {
        int i = from;
        while (i < source.length() && !source.startsWith(quote, i)) {
            i += source.charAt(i) == '\\' ? 2 : 1;
        }
        return Math.min(source.length(), i + quote.length());
    }
}
