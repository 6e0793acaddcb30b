package countwright.kernel.cell;

import countwright.show.MimeBundle;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.Collectors;
import jdk.jshell.SourceCodeAnalysis;
import jdk.jshell.SourceCodeAnalysis.Documentation;
import jdk.jshell.SourceCodeAnalysis.Suggestion;

/** Completes, documents and judges code as it is typed. The caller holds the compiler lock. */
final class CodeAssistant {

    private static final int INDENT = 4;

    private final SourceCodeAnalysis analysis;

    CodeAssistant(SourceCodeAnalysis analysis) {
        this.analysis = analysis;
    }

    Completeness completeness(String code) {
        String remaining = code;
        while (!remaining.isBlank()) {
            SourceCodeAnalysis.CompletionInfo info = analysis.analyzeCompletion(remaining);
            switch (info.completeness()) {
                case COMPLETE, COMPLETE_WITH_SEMI -> {
                    if (info.remaining().length() >= remaining.length()) {
                        return new Completeness.Complete();
                    }
                    remaining = info.remaining();
                }
                case EMPTY -> {
                    return new Completeness.Complete();
                }
                case CONSIDERED_INCOMPLETE, DEFINITELY_INCOMPLETE -> {
                    return new Completeness.Incomplete(indentAfter(code));
                }
                case UNKNOWN -> {
                    return new Completeness.Invalid();
                }
            }
        }
        return new Completeness.Complete();
    }

    private static String indentAfter(String code) {
        int depth = 0;
        for (int i = 0; i < code.length(); i++) {
            char c = code.charAt(i);
            if (c == '{' || c == '(') {
                depth++;
            } else if (c == '}' || c == ')') {
                depth--;
            }
        }
        return " ".repeat(INDENT * Math.max(0, depth));
    }

    Completions complete(String code, int cursor) {
        int start = startOfPieceAt(code, cursor);
        int[] anchor = {cursor - start};
        List<Suggestion> suggestions = analysis.completionSuggestions(code.substring(start), cursor - start, anchor);
        // Better fits for the expected type come first; otherwise the compiler's order stands.
        Map<String, Completions.Match> matches = new LinkedHashMap<>();
        for (boolean fits : new boolean[] {true, false}) {
            for (Suggestion suggestion : suggestions) {
                // The names JShell makes up for bare expressions are nobody's wish.
                if (suggestion.matchesType() == fits
                        && !suggestion.continuation().startsWith("$")) {
                    String text = suggestion.continuation();
                    matches.putIfAbsent(text, new Completions.Match(text, typeOf(text)));
                }
            }
        }
        return new Completions(start + anchor[0], cursor, List.copyOf(matches.values()));
    }

    private static String typeOf(String text) {
        if (text.endsWith("(") || text.endsWith(")")) {
            return "function";
        }
        if (!text.isEmpty() && Character.isUpperCase(text.charAt(0))) {
            return "class";
        }
        return "instance";
    }

    MimeBundle inspect(String code, int cursor, CellEngine.Detail detail) {
        int start = startOfPieceAt(code, cursor);
        String piece = code.substring(start);
        int end = endOfName(piece, cursor - start);
        List<Documentation> found = analysis.documentation(piece, end, detail == CellEngine.Detail.FULL);
        if (found.isEmpty() && end > 0 && Character.isJavaIdentifierPart(piece.charAt(end - 1))) {
            // The compiler knows a method by its bracket, whether it has been typed or not.
            found = analysis.documentation(piece.substring(0, end) + "(", end + 1, detail == CellEngine.Detail.FULL);
        }
        return MimeBundle.text(found.stream()
                .map(each -> each.javadoc() == null || each.javadoc().isBlank()
                        ? each.signature()
                        : each.signature() + "\n\n" + each.javadoc().strip())
                .distinct()
                .collect(Collectors.joining("\n\n")));
    }

    /** Returns where the statement begins that the cursor is in: the compiler looks at one at a time. */
    private int startOfPieceAt(String code, int cursor) {
        int start = 0;
        while (start < cursor) {
            String remaining = code.substring(start);
            SourceCodeAnalysis.CompletionInfo info = analysis.analyzeCompletion(remaining);
            boolean whole = info.completeness() == SourceCodeAnalysis.Completeness.COMPLETE
                    || info.completeness() == SourceCodeAnalysis.Completeness.COMPLETE_WITH_SEMI;
            int next = code.length() - info.remaining().length();
            if (!whole || next <= start || next >= cursor) {
                return start;
            }
            start = next;
        }
        return start;
    }

    private static int endOfName(String code, int cursor) {
        int end = cursor;
        while (end < code.length() && Character.isJavaIdentifierPart(code.charAt(end))) {
            end++;
        }
        return end;
    }
}
