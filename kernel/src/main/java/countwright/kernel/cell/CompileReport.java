package countwright.kernel.cell;

import countwright.kernel.cell.CellText.Place;
import countwright.show.NearNames;
import java.util.ArrayList;
import java.util.Collection;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import jdk.jshell.DeclarationSnippet;
import jdk.jshell.Diag;
import jdk.jshell.JShell;
import jdk.jshell.Snippet;

/** Tells of code that does not compile: the line as written, a caret under the place, what is wrong, what to do. */
final class CompileReport {

    /** The name of a failure to compile. */
    static final String NAME = "CompileError";

    private static final Pattern SYMBOL = Pattern.compile("symbol:\\s+(\\w+)\\s+([^\\s(<]+)");
    private static final Pattern LOCATION = Pattern.compile("location:\\s+(.+)");

    private final JShell shell;

    CompileReport(JShell shell) {
        this.shell = shell;
    }

    CellOutcome.Failure of(Snippet snippet, CellSplitter.Piece piece, CellText cell) {
        List<String> lines = new ArrayList<>();
        String first = "";
        List<Diag> errors = shell.diagnostics(snippet).filter(Diag::isError).toList();
        // The parser's complaints after the first are mostly about what the first left in disorder.
        boolean syntax = errors.stream().anyMatch(CompileReport::isSyntax);
        for (Diag error : syntax ? errors.subList(0, 1) : errors) {
            String explanation = explain(error, piece);
            if (first.isEmpty()) {
                first = explanation;
            } else {
                lines.add("");
            }
            lines.addAll(point(error, piece, cell));
            lines.add(explanation);
        }
        if (lines.isEmpty()) {
            first = snippet instanceof DeclarationSnippet declaration
                    ? "'" + declaration.name() + "' " + whyUnusable(declaration)
                    : "This piece of code cannot be compiled.";
            Place place = cell.placeOf(piece.start());
            lines.add(header(cell, place));
            lines.add(first);
        }
        return new CellOutcome.Failure(NAME, first.lines().findFirst().orElse(first), lines);
    }

    /** Says, after the name of a declaration, why it cannot be used as things are; a sentence without its subject. */
    String whyUnusable(DeclarationSnippet declaration) {
        List<String> waitsFor = shell.unresolvedDependencies(declaration).toList();
        if (!waitsFor.isEmpty()) {
            return "refers to " + String.join(", ", waitsFor) + ", not declared so far.";
        }
        if (declaration.kind() == Snippet.Kind.VAR) {
            return "has lost its value, because what it depends on was declared anew.";
        }
        return "does not compile with what is declared now"
                + shell.diagnostics(declaration)
                        .filter(Diag::isError)
                        .findFirst()
                        .map(error -> ": "
                                + UserNames.of(error.getMessage(Locale.ENGLISH)).strip())
                        .orElse("")
                + ".";
    }

    private static boolean isSyntax(Diag error) {
        return error.getCode().startsWith("compiler.err.expected")
                || error.getCode().startsWith("compiler.err.premature")
                || error.getCode().startsWith("compiler.err.illegal.start")
                || error.getCode().startsWith("compiler.err.unclosed");
    }

    private static List<String> point(Diag error, CellSplitter.Piece piece, CellText cell) {
        int start = piece.start() + (int) Math.max(0, error.getStartPosition());
        int end = piece.start() + (int) Math.max(error.getEndPosition(), error.getStartPosition());
        Place place = cell.placeOf(start);
        String line = cell.line(place.line());
        int caretStart = Math.min(place.column() - 1, line.length());
        int caretLength = Math.max(1, Math.min(end - start, line.length() - caretStart));
        StringBuilder margin = new StringBuilder();
        for (int i = 0; i < caretStart; i++) {
            margin.append(line.charAt(i) == '\t' ? '\t' : ' ');
        }
        return List.of(header(cell, place), "    " + line, "    " + margin + "^".repeat(caretLength));
    }

    private static String header(CellText cell, Place place) {
        return capitalised(cell.name()) + ", line " + place.line() + ", column " + place.column();
    }

    private String explain(Diag error, CellSplitter.Piece piece) {
        String code = error.getCode();
        String message = UserNames.of(String.valueOf(error.getMessage(Locale.ENGLISH)));
        if (code.startsWith("compiler.err.cant.resolve")) {
            return explainUnknown(message, error, piece);
        }
        if (code.startsWith("compiler.err.unclosed.char.lit")) {
            return "Single quotes hold one character.\nText stands in double quotes: \"like this\".";
        }
        boolean open = code.startsWith("compiler.err.premature.eof") || code.startsWith("compiler.err.unclosed");
        if (open || (!piece.whole() && code.startsWith("compiler.err.expected"))) {
            return message.lines().findFirst().orElse(message)
                    + ".\nThe cell ends before this statement does: close the open bracket, brace or quote.";
        }
        if (code.startsWith("compiler.err.expected") && message.startsWith("';'")) {
            return "A semicolon is missing here.\nOnly the last expression of a cell may go without one, to show its value.";
        }
        return capitalised(message.strip());
    }

    private String explainUnknown(String message, Diag error, CellSplitter.Piece piece) {
        Matcher symbol = SYMBOL.matcher(message);
        if (!symbol.find()) {
            return capitalised(message.strip());
        }
        String kind = symbol.group(1);
        String name = symbol.group(2);
        Matcher location = LOCATION.matcher(message);
        String owner = location.find() ? location.group(1).strip() : "";
        boolean member = !owner.isEmpty() && !owner.equals("class");
        String text = "'" + name + "' is not known: "
                + (member
                        ? memberSentence(kind, owner)
                        : "no " + kind + " of that name has been declared or imported.");
        if (member) {
            String question = NearNames.question(name, membersAt(error, piece));
            return question.isEmpty() ? text : text + "\n" + question;
        }
        Optional<DeclarationSnippet> unusable = shell.snippets()
                .filter(snippet -> shell.status(snippet) == Snippet.Status.RECOVERABLE_NOT_DEFINED)
                .filter(DeclarationSnippet.class::isInstance)
                .map(DeclarationSnippet.class::cast)
                .filter(declared -> declared.name().equals(name))
                .findFirst();
        if (unusable.isPresent()) {
            return "'" + name + "' was declared, but it " + whyUnusable(unusable.get())
                    + "\n"
                    + (unusable.get().kind() == Snippet.Kind.VAR
                            ? "Run the cell that sets it again."
                            : "Correct it and run it again.");
        }
        String question = NearNames.question(name, namesFor(name));
        return text
                + "\n"
                + (question.isEmpty()
                        ? "If another cell declares it, run that cell first; otherwise declare it or correct the spelling."
                        : question);
    }

    private static String memberSentence(String kind, String owner) {
        return owner + " has no such " + kind + ".";
    }

    /** Returns what could stand after the dot at which the compiler gave up. */
    private List<String> membersAt(Diag error, CellSplitter.Piece piece) {
        int dot = (int) error.getPosition();
        String source = piece.source();
        return dot >= 0 && dot < source.length() && source.charAt(dot) == '.'
                ? suggestions(source.substring(0, dot + 1))
                : List.of();
    }

    /** Returns the names declared, and those in reach that begin as the unknown one does. */
    private Collection<String> namesFor(String unknown) {
        Stream<String> declared = shell.snippets()
                .filter(snippet -> shell.status(snippet).isActive())
                .filter(DeclarationSnippet.class::isInstance)
                .map(snippet -> ((DeclarationSnippet) snippet).name());
        return Stream.concat(declared, suggestions(unknown.substring(0, 1)).stream())
                .filter(name -> !name.equals(unknown))
                .distinct()
                .toList();
    }

    private List<String> suggestions(String source) {
        return shell.sourceCodeAnalysis().completionSuggestions(source, source.length(), new int[1]).stream()
                .map(suggestion -> suggestion.continuation().replaceAll("[^\\w].*", ""))
                .filter(name -> !name.isEmpty() && !name.startsWith("$"))
                .distinct()
                .toList();
    }

    private static String capitalised(String text) {
        return text.isEmpty() ? text : Character.toUpperCase(text.charAt(0)) + text.substring(1);
    }
}
