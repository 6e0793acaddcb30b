package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Message;
import java.nio.file.Path;
import java.util.Map;
import java.util.Optional;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** What ends or hangs the user's JVM ends one cell, never the session's kernel. */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class WorkerFaultsKernelTest {

    @TempDir
    private static Path temporary;

    private static Optional<LiveKernel> started = Optional.empty();

    @BeforeAll
    static void start() throws Exception {
        started = Optional.of(LiveKernel.start(temporary, temporary, Map.of("COUNTWRIGHT_WORKER_OPTIONS", "-Xmx256m")));
    }

    @AfterAll
    static void end() throws Exception {
        kernel().close();
    }

    @AfterEach
    void nextCell_works() throws Exception {
        assertThat(kernel().run("6 * 7")).isEqualTo(new LiveKernel.Outcome("", "42", ""));
        assertThat(kernel().run("Table.of(numbers(\"age\", 1, 2)).rowCount()").value())
                .isEqualTo("2");
    }

    @Test
    void systemExit_isTheErrorOfItsCell() throws Exception {
        LiveKernel.Outcome outcome = kernel().run("System.out.println(\"before\");\nSystem.exit(3);");

        assertThat(outcome.printed()).isEqualTo("before\n");
        assertThat(outcome.error()).contains("System.exit", "3").doesNotContain("\tat ");
    }

    @Test
    void systemExit_losesTheVariablesAndSaysSo() throws Exception {
        kernel().run("int kept = 1;");

        String error = kernel().run("System.exit(3);").error();

        assertThat(error).contains("What earlier cells declared is lost", "A fresh worker is ready");
        assertThat(kernel().run("kept").error()).contains("kept");
    }

    @Test
    void stackOverflow_isTheErrorOfItsCellAndKeepsVariables() throws Exception {
        kernel().run("int deep = 5; int dive(int n) { return dive(n + 1) + 1; }");

        LiveKernel.Outcome outcome = kernel().run("dive(0)");

        assertThat(outcome.error()).contains("StackOverflowError", "dive");
        assertThat(outcome.error().lines().count()).as("lines of the error").isLessThan(40);
        assertThat(kernel().run("deep").value()).isEqualTo("5");
    }

    @Test
    void outOfMemory_isTheErrorOfItsCell() throws Exception {
        LiveKernel.Outcome outcome = kernel().run(
                        "List<long[]> hoard = new ArrayList<>();\nwhile (true) { hoard.add(new long[1_000_000]); }");

        assertThat(outcome.error()).contains("OutOfMemoryError", "memory", "COUNTWRIGHT_WORKER_OPTIONS");
    }

    @Test
    void endlessLoop_interrupted_stopsAndKeepsVariables() throws Exception {
        kernel().run("int loops = 9;");
        Message cell = kernel().begin("System.out.println(\"spinning\");\nwhile (true) { }");
        kernel().awaitOutput(cell);

        kernel().interrupt();

        assertThat(kernel().end(cell).error()).containsIgnoringCase("interrupt");
        assertThat(kernel().run("loops").value()).isEqualTo("9");
    }

    private static LiveKernel kernel() {
        return started.orElseThrow();
    }
}
