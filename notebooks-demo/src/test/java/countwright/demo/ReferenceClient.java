package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.fail;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicBoolean;
import org.junit.jupiter.api.Assumptions;

/**
 * A Python with the protocol's reference client, its notebook runner and the reference kernel. Not every machine has
 * one: its tests are skipped then, with the reason, unless {@code COUNTWRIGHT_CLIENTS} is {@code required}.
 */
final class ReferenceClient {

    private static final System.Logger LOG = System.getLogger(ReferenceClient.class.getName());
    private static final AtomicBoolean TOLD = new AtomicBoolean();
    private static final String PYTHON_VARIABLE = "COUNTWRIGHT_PYTHON";
    private static final boolean REQUIRED = "required".equals(System.getenv("COUNTWRIGHT_CLIENTS"));
    private static final String NEEDED = "jupyter_client, nbclient, nbformat, ipykernel, jupyter_kernel_test";
    private static final Path PROGRAMS = Path.of("src/test/python").toAbsolutePath();
    private static final int LIMIT_SECONDS = 300;
    private static final Map<String, String> LACKS = new ConcurrentHashMap<>();

    private final String python;

    private ReferenceClient(String python) {
        this.python = python;
    }

    /** How a process ended and all that it said. */
    record Ending(int status, String said) {}

    /** Returns the client of this machine, or else skips the test that asks, or fails it where clients are required. */
    static ReferenceClient ofThisMachine() {
        String python = System.getenv().getOrDefault(PYTHON_VARIABLE, "python3");
        String lack = LACKS.computeIfAbsent(python, ReferenceClient::lackOf);
        if (!lack.isEmpty()) {
            String reason = "needs a Python with " + NEEDED + ", but " + lack
                    + " Get them with 'python3 -m venv DIR && DIR/bin/pip install " + NEEDED.replace(",", "")
                    + "' or, on Debian and Ubuntu, 'apt install python3-nbclient python3-ipykernel python3-jupyter-kernel-test', and name the Python in "
                    + PYTHON_VARIABLE + ".";
            if (REQUIRED) {
                fail("COUNTWRIGHT_CLIENTS is 'required': this test " + reason);
            }
            if (TOLD.compareAndSet(false, true)) {
                // The build's own output counts what was skipped and leaves out why.
                LOG.log(System.Logger.Level.WARNING, "Tests with real clients are skipped: each " + reason);
            }
            Assumptions.abort(reason);
        }
        return new ReferenceClient(python);
    }

    /** Plays a scene of reference_client.py for front ends that look for kernels in one folder. */
    void plays(Path jupyterFolder, String... sceneAndArguments) throws IOException {
        runs(jupyterFolder, "reference_client.py", sceneAndArguments);
    }

    /** Runs a Python program of the tests to its end, which must be good, and returns what it said. */
    String runs(Path jupyterFolder, String program, String... arguments) throws IOException {
        List<String> command =
                new ArrayList<>(List.of(python, PROGRAMS.resolve(program).toString()));
        command.addAll(Arrays.asList(arguments));
        Ending ending = run(
                command,
                Map.of("JUPYTER_PATH", jupyterFolder.toString(), "JAVA_HOME", System.getProperty("java.home")));
        assertThat(ending.status()).as(ending.said()).isZero();
        return ending.said();
    }

    /** Runs a command to its end. */
    static Ending run(List<String> command, Map<String, String> environment) throws IOException {
        Path said = Files.createTempFile("countwright-said", ".txt");
        try {
            ProcessBuilder builder = new ProcessBuilder(command)
                    .redirectErrorStream(true)
                    .redirectOutput(said.toFile())
                    .redirectInput(
                            ProcessBuilder.Redirect.from(Path.of("/dev/null").toFile()));
            builder.environment().putAll(environment);
            Process process = builder.start();
            if (!process.waitFor(LIMIT_SECONDS, TimeUnit.SECONDS)) {
                process.descendants().forEach(ProcessHandle::destroyForcibly);
                process.destroyForcibly();
                fail(command + " did not end within " + LIMIT_SECONDS + " s. It said: " + read(said));
            }
            return new Ending(process.exitValue(), read(said));
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new IOException("interrupted while waiting for " + command, e);
        } finally {
            Files.deleteIfExists(said);
        }
    }

    private static String lackOf(String python) {
        try {
            Ending ending = run(List.of(python, "-c", "import " + NEEDED), Map.of());
            List<String> lines = ending.said().strip().lines().toList();
            return ending.status() == 0
                    ? ""
                    : python + " says: " + (lines.isEmpty() ? "" : lines.get(lines.size() - 1)) + ".";
        } catch (IOException e) {
            return python + " cannot be started (" + e.getMessage() + ").";
        }
    }

    private static String read(Path file) throws IOException {
        return Files.readString(file, StandardCharsets.UTF_8);
    }
}
