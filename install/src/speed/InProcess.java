import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.StringJoiner;
import jdk.jshell.JShell;
import jdk.jshell.Snippet;
import jdk.jshell.SnippetEvent;
import jdk.jshell.SourceCodeAnalysis.CompletionInfo;

/**
 * JShell in one process, the measure for what the kernel adds. Its first line of output says that it has a first result;
 * each line it reads says how many cells to run, and is answered with the nanoseconds of every one.
 */
final class InProcess {

    private static final String IMPORTS = "/countwright/show/session-imports.txt";

    private InProcess() {}

    public static void main(String[] arguments) throws IOException {
        String cell = Files.readString(Path.of(arguments[1])).strip();
        JShell shell = open(arguments[0].equals("imports"));
        evaluate(shell, cell);
        System.out.println("ready");
        BufferedReader in = new BufferedReader(new InputStreamReader(System.in, StandardCharsets.US_ASCII));
        for (String line = in.readLine(); line != null; line = in.readLine()) {
            StringJoiner nanos = new StringJoiner(" ");
            for (int i = Integer.parseInt(line); i > 0; i--) {
                long start = System.nanoTime();
                evaluate(shell, cell);
                nanos.add(Long.toString(System.nanoTime() - start));
            }
            System.out.println(nanos);
        }
        shell.close();
    }

    private static JShell open(boolean withImports) {
        JShell shell = JShell.builder()
                .executionEngine("local")
                .compilerOptions("--class-path", System.getProperty("java.class.path"))
                .build();
        if (withImports) {
            imports().forEach(shell::eval);
        }
        return shell;
    }

    private static List<String> imports() {
        try (InputStream in = InProcess.class.getResourceAsStream(IMPORTS)) {
            return new String(in.readAllBytes(), StandardCharsets.UTF_8)
                    .lines()
                    .filter(line -> line.startsWith("import"))
                    .toList();
        } catch (IOException e) {
            throw new IllegalStateException(e);
        }
    }

    private static void evaluate(JShell shell, String cell) {
        for (String rest = cell; !rest.isBlank(); ) {
            CompletionInfo piece = shell.sourceCodeAnalysis().analyzeCompletion(rest);
            List<SnippetEvent> events = shell.eval(piece.source());
            for (SnippetEvent event : events) {
                if (event.status() == Snippet.Status.REJECTED || event.exception() != null) {
                    throw new IllegalStateException("the cell does not run in JShell: " + piece.source());
                }
                // As in the kernel: each name left behind by a bare expression would make the next cell slower.
                if (event.snippet().subKind() == Snippet.SubKind.TEMP_VAR_EXPRESSION_SUBKIND) {
                    shell.drop(event.snippet());
                }
            }
            rest = piece.remaining();
        }
    }
}
