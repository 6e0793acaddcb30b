import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.StringJoiner;
import jdk.jshell.JShell;
import jdk.jshell.Snippet;
import jdk.jshell.SnippetEvent;

/**
 * JShell in one process, the measure for what the kernel adds. Each line it reads says how many cells to run, and is
 * answered with the nanoseconds of every one.
 */
final class InProcess {

    private static final String IMPORTS = "/countwright/show/session-imports.txt";

    private InProcess() {}

    public static void main(String[] arguments) throws IOException {
        String session = arguments[0];
        String cell = arguments[1];
        JShell shell = open(session);
        BufferedReader in = new BufferedReader(new InputStreamReader(System.in, StandardCharsets.US_ASCII));
        for (String line = in.readLine(); line != null; line = in.readLine()) {
            StringJoiner nanos = new StringJoiner(" ");
            for (int i = Integer.parseInt(line); i > 0; i--) {
                nanos.add(Long.toString(evaluate(shell, cell, session.endsWith("analysed"))));
            }
            System.out.println(nanos);
        }
        shell.close();
    }

    private static JShell open(String session) {
        JShell shell = JShell.builder()
                .executionEngine("local")
                .compilerOptions("--class-path", System.getProperty("java.class.path"))
                .build();
        if (session.startsWith("imports")) {
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

    private static long evaluate(JShell shell, String cell, boolean analysed) {
        long start = System.nanoTime();
        String source = analysed ? shell.sourceCodeAnalysis().analyzeCompletion(cell).source() : cell;
        List<SnippetEvent> events = shell.eval(source);
        long nanos = System.nanoTime() - start;
        for (SnippetEvent event : events) {
            if (event.status() != Snippet.Status.VALID) {
                throw new IllegalStateException("the cell does not run in JShell: " + cell);
            }
            // As in the kernel: each name left behind would make the next cell slower.
            shell.drop(event.snippet());
        }
        return nanos;
    }
}
