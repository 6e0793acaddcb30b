package countwright.kernel.cell;

import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.lang.reflect.Field;
import java.util.ArrayList;
import java.util.Collection;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.NavigableMap;
import java.util.Optional;
import java.util.Set;
import java.util.regex.MatchResult;
import java.util.regex.Pattern;
import java.util.stream.Collectors;
import jdk.jshell.JShell;
import jdk.jshell.Snippet;
import jdk.jshell.SourceCodeAnalysis;
import jdk.jshell.VarSnippet;

/**
 * JShell's own books about its snippets, kept short.
 *
 * <p>JShell forgets nothing: the classes of all snippets ever run, dropped ones too, are read again by the compiler several
 * times for each new snippet, and every living variable is imported into it. After a thousand cells a cell takes twice its
 * time, among a thousand variables five times. Nothing of that is needed, so this class strikes out what has gone, and hides
 * from the compiler, for one snippet, the variables that the snippet does not name. That also keeps their values: a variable
 * declared with {@code var} would be emptied when one that its initialiser names is declared anew.
 *
 * <p>The books are private to JShell. They can be reached only where its package is opened to the kernel by
 * {@value #OPENED}; otherwise everything works as well, but gets slower with time. The caller holds the compiler lock.
 */
final class SnippetLedger {

    /** What the JVM is to be started with. */
    static final String OPENED = "--add-opens=jdk.jshell/jdk.jshell=ALL-UNNAMED";

    private static final Logger LOG = System.getLogger(SnippetLedger.class.getName());

    private static final Pattern IDENTIFIER =
            Pattern.compile("[\\p{javaJavaIdentifierStart}][\\p{javaJavaIdentifierPart}]*");

    /** A snippet with one of these may change what other declarations mean, so all must be seen. */
    private static final Set<String> DECLARING = Set.of("class", "interface", "enum", "record", "import");

    private final JShell shell;
    private final SourceCodeAnalysis analysis;
    private final Optional<Books> books;
    /** What a piece with one of these in it may leave behind names its variables for as long as it lives. */
    private static final Pattern LEAVES_CODE = Pattern.compile("->|::|\\bclass\\b|\\bnew\\b[^;{}]*\\)\\s*\\{");

    private final Set<String> namedByCodeLeftBehind = new HashSet<>();
    private final Map<Snippet, Set<String>> namedByDeclarations = new LinkedHashMap<>();
    private final Map<Integer, Snippet> hiddenSnippets = new LinkedHashMap<>();
    private final Map<String, Object> hiddenClasses = new LinkedHashMap<>();

    /**
     * The books: each snippet by its index, all snippets, the compiled classes by full name, the wrapped sources by class name.
     */
    private record Books(
            List<Snippet> byIndex, Collection<?> all, NavigableMap<String, Object> classes, Map<?, ?> sources) {}

    SnippetLedger(JShell shell) {
        this.shell = shell;
        this.analysis = shell.sourceCodeAnalysis();
        this.books = open(shell);
    }

    /** Tells whether the books can be kept. */
    boolean isOpen() {
        return books.isPresent();
    }

    /** Drops a snippet and strikes out what JShell would keep of it. */
    void forget(Snippet snippet) {
        Optional<String> className = className(snippet);
        shell.drop(snippet);
        books.ifPresent(open -> {
            open.all().remove(snippet);
            int index = open.byIndex().lastIndexOf(snippet);
            if (index >= 0) {
                open.byIndex().set(index, null);
            }
        });
        className.ifPresent(this::forgetClass);
    }

    /** Strikes out the class of a snippet that can no longer be named, such as that of a variable declared anew. */
    void forgetClass(String className) {
        books.ifPresent(open -> {
            open.classes().remove(className);
            open.classes().subMap(className + "$", className + "%").clear();
            open.sources().remove(className.substring(className.lastIndexOf('.') + 1));
        });
    }

    /** Takes note of a piece that has run: a lambda or an object that it made may name variables later. */
    void hasRun(String source) {
        if (LEAVES_CODE.matcher(source).find()) {
            namedByCodeLeftBehind.addAll(identifiers(source));
        }
    }

    /** Tells whether code that earlier pieces left behind may still name a variable, also after it is declared anew. */
    boolean mayBeNamed(String variable) {
        return namedByCodeLeftBehind.contains(variable);
    }

    /** Returns the full name of the class that JShell has made of a snippet, if it has. */
    Optional<String> className(Snippet snippet) {
        try {
            return Optional.of(analysis.wrapper(snippet).fullClassName());
        } catch (RuntimeException noWrap) {
            return Optional.empty();
        }
    }

    /**
     * Hides, until {@link #showAll}, the variables that the source does not name. If the snippet is then rejected, it may be
     * for that reason: show all and try again.
     *
     * @return whether anything is hidden
     */
    boolean hideUnnamed(String source) {
        if (books.isEmpty()) {
            return false;
        }
        Books open = books.get();
        List<VarSnippet> variables = shell.variables().toList();
        Set<String> named = identifiers(source);
        if (DECLARING.stream().anyMatch(named::contains)) {
            return false;
        }
        named.addAll(namedByDeclarations());
        for (VarSnippet variable : variables) {
            if (!named.contains(variable.name())) {
                hide(open, variable);
            }
        }
        return !hiddenSnippets.isEmpty();
    }

    /** Shows again what was hidden. */
    void showAll() {
        books.ifPresent(open -> {
            hiddenSnippets.forEach(open.byIndex()::set);
            open.classes().putAll(hiddenClasses);
        });
        hiddenSnippets.clear();
        hiddenClasses.clear();
    }

    private void hide(Books open, VarSnippet variable) {
        String className = className(variable).orElse("");
        boolean hasTypesOfItsOwn =
                !open.classes().subMap(className + "$", className + "%").isEmpty();
        int index = indexOf(open, variable);
        Object compiled = open.classes().get(className);
        // Other variables may be of a type that stands inside this one's class.
        if (hasTypesOfItsOwn || index < 0 || compiled == null) {
            return;
        }
        open.byIndex().set(index, null);
        open.classes().remove(className);
        hiddenSnippets.put(index, variable);
        hiddenClasses.put(className, compiled);
    }

    private static int indexOf(Books open, VarSnippet variable) {
        // JShell's ids are the indices, unless told otherwise, and we do not.
        try {
            int index = Integer.parseInt(variable.id());
            return index < open.byIndex().size() && open.byIndex().get(index) == variable ? index : -1;
        } catch (NumberFormatException other) {
            return -1;
        }
    }

    /** What methods and types name must stay in sight: they may have to be compiled anew. */
    private Set<String> namedByDeclarations() {
        List<Snippet> declarations = shell.snippets()
                .filter(each -> each.kind() == Snippet.Kind.METHOD || each.kind() == Snippet.Kind.TYPE_DECL)
                .filter(each -> shell.status(each).isActive())
                .toList();
        namedByDeclarations.keySet().retainAll(declarations);
        Set<String> named = new HashSet<>();
        declarations.forEach(each ->
                named.addAll(namedByDeclarations.computeIfAbsent(each, snippet -> identifiers(snippet.source()))));
        return named;
    }

    private static Set<String> identifiers(String source) {
        return IDENTIFIER
                .matcher(source)
                .results()
                .map(MatchResult::group)
                .collect(Collectors.toCollection(HashSet::new));
    }

    @SuppressWarnings("unchecked")
    private static Optional<Books> open(JShell shell) {
        try {
            Object maps = valueOf(shell, "maps");
            Object files = valueOf(valueOf(shell, "taskFactory"), "fileManager");
            return Optional.of(new Books(
                    (ArrayList<Snippet>) valueOf(maps, "keyIndexToSnippet"),
                    (Set<?>) valueOf(maps, "snippets"),
                    (NavigableMap<String, Object>) valueOf(files, "classObjects"),
                    (Map<?, ?>) valueOf(valueOf(shell, "outerMap"), "classOuters")));
        } catch (ReflectiveOperationException | RuntimeException closed) {
            LOG.log(
                    Level.INFO,
                    "Long sessions will get slower: start the kernel with " + OPENED + " (" + closed.getMessage()
                            + ")");
            return Optional.empty();
        }
    }

    private static Object valueOf(Object owner, String name) throws ReflectiveOperationException {
        Field field = owner.getClass().getDeclaredField(name);
        field.setAccessible(true);
        return field.get(owner);
    }
}
