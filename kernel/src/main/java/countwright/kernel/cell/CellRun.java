package countwright.kernel.cell;

import countwright.kernel.cell.CellSplitter.Piece;
import countwright.worker.Frame;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.function.Supplier;
import java.util.regex.Pattern;
import jdk.jshell.DeclarationSnippet;
import jdk.jshell.JShell;
import jdk.jshell.JShellException;
import jdk.jshell.Snippet;
import jdk.jshell.SnippetEvent;
import jdk.jshell.VarSnippet;

/**
 * One run of one cell: piece after piece, to the end or to the first that fails. The caller holds the compiler lock.
 *
 * <p>What a piece does to other declarations is told once the cell has ended, because a later piece often mends it: a
 * method may call one declared below it, and whoever runs a class again usually runs its variables again.
 */
final class CellRun {

    private final JShell shell;
    private final SnippetLedger ledger;
    private final WorkerExecution execution;
    private final CellMap cells;
    private final CellText cell;
    private final CellListener listener;
    private final Supplier<Boolean> stopRequested;
    private final Supplier<Optional<CellOutcome.Failure>> afterPiece;
    private final CompileReport compileReport;
    private final List<Waiting> waiting = new ArrayList<>();
    private final List<SnippetEvent> dependents = new ArrayList<>();
    private List<Piece> pieces = List.of();

    /** A declaration that waits for another. */
    private record Waiting(DeclarationSnippet snippet, Piece piece) {}

    CellRun(
            JShell shell,
            SnippetLedger ledger,
            WorkerExecution execution,
            CellMap cells,
            CellText cell,
            CellListener listener,
            Supplier<Boolean> stopRequested,
            Supplier<Optional<CellOutcome.Failure>> afterPiece) {
        this.shell = shell;
        this.ledger = ledger;
        this.execution = execution;
        this.cells = cells;
        this.cell = cell;
        this.listener = listener;
        this.stopRequested = stopRequested;
        this.afterPiece = afterPiece;
        this.compileReport = new CompileReport(shell);
    }

    CellOutcome run() {
        pieces = CellSplitter.split(cell.code(), shell.sourceCodeAnalysis());
        if (!pieces.isEmpty() && !pieces.get(pieces.size() - 1).whole()) {
            // Half a statement at the end: say so before anything has run.
            return runPiece(pieces.get(pieces.size() - 1), Frame.Want.NOTHING);
        }
        CellOutcome outcome = runAll();
        if (execution.loss().isPresent()) {
            return outcome;
        }
        dependents.forEach(this::tellChange);
        Optional<CellOutcome.Failure> neverDeclared = settleWaiting();
        return outcome instanceof CellOutcome.Success && neverDeclared.isPresent() ? neverDeclared.get() : outcome;
    }

    private CellOutcome runAll() {
        CellOutcome outcome = new CellOutcome.Success(Optional.empty());
        for (int i = 0; i < pieces.size(); i++) {
            if (stopRequested.get()) {
                return interrupted(cell);
            }
            Piece piece = pieces.get(i);
            boolean shown = i == pieces.size() - 1 && piece.showsValue();
            outcome = runPiece(piece, shown ? Frame.Want.BUNDLE : Frame.Want.NOTHING);
            if (outcome instanceof CellOutcome.Success) {
                outcome = afterPiece.get().<CellOutcome>map(failure -> failure).orElse(outcome);
            }
            if (outcome instanceof CellOutcome.Failure) {
                return stopRequested.get() && execution.loss().isEmpty() ? interrupted(cell) : outcome;
            }
        }
        return stopRequested.get() ? interrupted(cell) : outcome;
    }

    private CellOutcome runPiece(Piece piece, Frame.Want want) {
        Optional<Snippet> unchanged = sameAsBefore(piece);
        if (unchanged.isPresent()) {
            cells.remember(unchanged.get(), cell, piece.start());
            return new CellOutcome.Success(Optional.empty());
        }
        try {
            if (want == Frame.Want.BUNDLE) {
                Optional<CellOutcome> handedOver = ShownValue.statement(
                                cell.code().substring(piece.start(), piece.end()))
                        .flatMap(statement -> evaluateIfItCompiles(statement, piece));
                if (handedOver.isPresent()) {
                    return handedOver.get();
                }
            }
            return evaluate(piece, want);
        } catch (IllegalStateException e) {
            return lost(execution.loss().orElse("the compiler's session has ended"));
        } finally {
            ledger.showAll();
        }
    }

    private Optional<CellOutcome> evaluateIfItCompiles(String statement, Piece piece) {
        execution.prepare(Frame.Want.BUNDLE);
        ledger.hideUnnamed(statement);
        List<SnippetEvent> events = shell.eval(statement);
        if (isRejected(events)) {
            forgetRejected(events);
            ledger.showAll();
            return Optional.empty();
        }
        return Optional.of(outcomeOf(events, piece));
    }

    private CellOutcome evaluate(Piece piece, Frame.Want want) {
        execution.prepare(want);
        boolean hidden = ledger.hideUnnamed(piece.source());
        List<SnippetEvent> events = shell.eval(piece.source());
        if (hidden && isRejected(events)) {
            // Perhaps for lack of what was hidden; if not, the report should know of everything.
            forgetRejected(events);
            ledger.showAll();
            events = shell.eval(piece.source());
        }
        return outcomeOf(events, piece);
    }

    /** Other declarations that were touched are none of ours. */
    private void forgetRejected(List<SnippetEvent> events) {
        events.stream().filter(event -> event.causeSnippet() == null).forEach(event -> ledger.forget(event.snippet()));
    }

    /** Tells whether nothing has been declared or run. */
    private static boolean isRejected(List<SnippetEvent> events) {
        return events.stream()
                .allMatch(event -> event.status() == Snippet.Status.REJECTED
                        || event.status() == Snippet.Status.RECOVERABLE_NOT_DEFINED);
    }

    private CellOutcome outcomeOf(List<SnippetEvent> events, Piece piece) {
        execution.loadPending();
        ledger.hasRun(piece.source());
        if (execution.loss().isPresent()) {
            return lost(execution.loss().get());
        }
        CellOutcome outcome = new CellOutcome.Success(Optional.empty());
        for (SnippetEvent event : events) {
            if (event.causeSnippet() != null) {
                dependents.add(event);
            } else if (outcome instanceof CellOutcome.Success) {
                // More than one where a piece declares several variables: the first that failed is the outcome.
                outcome = outcomeOf(event, piece);
            }
        }
        events.forEach(this::letGo);
        return outcome;
    }

    /**
     * Finds the class or method that stands exactly as in the piece. Declaring it anew would make it a new class, and
     * empty every variable that depends on it, although nothing has changed.
     */
    private Optional<Snippet> sameAsBefore(Piece piece) {
        String source = piece.source().strip();
        return shell.snippets()
                .filter(snippet -> snippet.kind() == Snippet.Kind.TYPE_DECL || snippet.kind() == Snippet.Kind.METHOD)
                .filter(snippet -> snippet.source().strip().equals(source))
                .filter(snippet -> shell.status(snippet) == Snippet.Status.VALID)
                .findFirst();
    }

    private CellOutcome outcomeOf(SnippetEvent event, Piece piece) {
        Snippet snippet = event.snippet();
        cells.remember(snippet, cell, piece.start());
        switch (event.status()) {
            case REJECTED, NONEXISTENT -> {
                return rejected(snippet, piece);
            }
            case RECOVERABLE_NOT_DEFINED -> {
                if (!(snippet instanceof DeclarationSnippet declaration) || !waitsForThisCell(declaration)) {
                    if (snippet instanceof VarSnippet variable && event.previousStatus() == Snippet.Status.VALID) {
                        tell("Note: '" + variable.name()
                                + "' is gone, because its new declaration does not compile. Declare it again.");
                    }
                    return rejected(snippet, piece);
                }
                waiting.add(new Waiting(declaration, piece));
            }
            case RECOVERABLE_DEFINED -> waiting.add(new Waiting((DeclarationSnippet) snippet, piece));
            case VALID, DROPPED, OVERWRITTEN -> {}
        }
        if (execution.wasStopped()) {
            return interrupted(cell);
        }
        JShellException exception = event.exception();
        if (exception != null) {
            return new ExceptionReport(cells, compileReport).of(exception);
        }
        return execution
                .fault()
                .<CellOutcome>map(CellRun::broken)
                .orElseGet(() -> new CellOutcome.Success(isOver(snippet) ? execution.value() : Optional.empty()));
    }

    private CellOutcome.Failure rejected(Snippet snippet, Piece piece) {
        CellOutcome.Failure failure = compileReport.of(snippet, piece, cell);
        cells.forget(snippet);
        ledger.forget(snippet);
        return failure;
    }

    /** Tells whether all types a declaration lacks are declared in this cell, as with classes that refer to each other. */
    private boolean waitsForThisCell(DeclarationSnippet declaration) {
        if (declaration.kind() != Snippet.Kind.TYPE_DECL && declaration.kind() != Snippet.Kind.METHOD) {
            return false;
        }
        List<String> lacking = shell.unresolvedDependencies(declaration).toList();
        return !lacking.isEmpty() && lacking.stream().allMatch(this::isDeclaredHere);
    }

    private boolean isDeclaredHere(String dependency) {
        String name = dependency.substring(dependency.lastIndexOf(' ') + 1);
        Pattern declaring = Pattern.compile("\\b(class|interface|enum|record)\\s+" + Pattern.quote(name) + "\\b");
        return pieces.stream()
                .anyMatch(piece -> declaring.matcher(piece.source()).find());
    }

    /** Tells what still waits at the end of the cell; what cannot even be referred to is an error. */
    private Optional<CellOutcome.Failure> settleWaiting() {
        Optional<CellOutcome.Failure> failure = Optional.empty();
        for (Waiting each : waiting) {
            Snippet.Status status = shell.status(each.snippet());
            if (status == Snippet.Status.RECOVERABLE_DEFINED) {
                tell("'" + each.snippet().name() + "' " + compileReport.whyUnusable(each.snippet())
                        + " It can be called once that is put right.");
            } else if (status == Snippet.Status.RECOVERABLE_NOT_DEFINED && failure.isEmpty()) {
                failure = Optional.of(rejected(each.snippet(), each.piece()));
            }
        }
        return failure;
    }

    /** Tells of a declaration of an earlier cell that this cell has broken or emptied. */
    private void tellChange(SnippetEvent event) {
        if (event.previousStatus() != Snippet.Status.VALID
                || !(event.snippet() instanceof DeclarationSnippet changed)
                || shell.status(changed) != event.status()) {
            return;
        }
        String where =
                cells.cellOf(changed).map(origin -> " of " + origin.name()).orElse("");
        boolean broken = event.status() == Snippet.Status.RECOVERABLE_DEFINED
                || event.status() == Snippet.Status.RECOVERABLE_NOT_DEFINED;
        boolean emptied = event.status() == Snippet.Status.VALID && event.isSignatureChange();
        if (changed.kind() == Snippet.Kind.VAR && (broken || emptied)) {
            tell("Note: '" + changed.name() + "'" + where
                    + " has lost its value, because what it depends on was declared anew. Run it again.");
        } else if (broken) {
            tell("Note: '" + changed.name() + "'" + where + " cannot be used any more: it "
                    + compileReport.whyUnusable(changed) + " Correct it and run it again.");
        }
    }

    private void tell(String note) {
        listener.output(CellListener.Stream.ERR, note + "\n");
    }

    /** Lets go of what no later cell can name: a piece that declares nothing, and the value a variable had before. */
    private void letGo(SnippetEvent event) {
        Snippet snippet = event.snippet();
        if (isOver(snippet) && event.status() == Snippet.Status.VALID) {
            cells.forgetAllButLines(snippet, shell.sourceCodeAnalysis().wrapper(snippet));
            if (snippet instanceof VarSnippet variable) {
                ledger.className(snippet).ifPresent(owner -> execution.release(owner, variable.name()));
            }
            ledger.forget(snippet);
        } else if (snippet instanceof VarSnippet variable
                && event.status() == Snippet.Status.OVERWRITTEN
                && !ledger.mayBeNamed(variable.name())) {
            // Declared anew in the very same words, a variable keeps its class.
            Optional<String> successor =
                    Optional.ofNullable(event.causeSnippet()).flatMap(ledger::className);
            ledger.className(snippet)
                    .filter(owner -> !successor.equals(Optional.of(owner)))
                    .ifPresent(owner -> execution.release(owner, variable.name()));
        }
    }

    /** Tells whether a piece that has run declares nothing; only such a piece can have a value to show. */
    private static boolean isOver(Snippet snippet) {
        return snippet.kind() == Snippet.Kind.STATEMENT
                || snippet.kind() == Snippet.Kind.EXPRESSION
                || snippet.subKind() == Snippet.SubKind.TEMP_VAR_EXPRESSION_SUBKIND;
    }

    /** Returns the outcome of a cell that an interrupt has stopped. */
    static CellOutcome.Failure interrupted(CellText cell) {
        String message = "Interrupted: " + cell.name() + " was stopped before its end. Variables are kept.";
        return new CellOutcome.Failure("Interrupted", message, List.of(message));
    }

    private static CellOutcome.Failure lost(String how) {
        return new CellOutcome.Failure(
                WorkerExecution.LOST,
                "the worker that ran this cell is gone: " + how,
                List.of(
                        "The worker that ran this cell is gone: " + how + ".",
                        "What earlier cells declared is lost with it. A fresh worker is ready."));
    }

    private static CellOutcome.Failure broken(String how) {
        String message = "this could not be run, through a fault of the kernel's own: " + how;
        return new CellOutcome.Failure(
                "KernelError",
                message,
                List.of("KernelError: " + message, "Run the cell again; if it fails again, restart the kernel."));
    }
}
