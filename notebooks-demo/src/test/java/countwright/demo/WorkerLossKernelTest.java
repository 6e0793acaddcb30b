package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.Message;
import java.nio.file.Path;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.TimeUnit;
import java.util.stream.Stream;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.JsonNodeFactory;

/** The loss of the worker is told in the cell that runs, with its cause, and a fresh worker is ready within a second. */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class WorkerLossKernelTest {

    private static final FaultTimes TIMES =
            new FaultTimes("Loss: seconds from the error to the reply of the next cell");

    /** Ends the process from outside; the cell waits for its end. */
    private static final String KILL =
            "new ProcessBuilder(\"kill\", \"%s\", \"\" + ProcessHandle.current().pid()).start(); Thread.sleep(60_000);";

    @TempDir
    private static Path temporary;

    private static Optional<LiveKernel> started = Optional.empty();

    /** A way for a cell to lose its worker, and a word of the cause that is told. */
    record Loss(String what, String code, String cause) {

        @Override
        public String toString() {
            return what;
        }
    }

    @BeforeAll
    static void start() throws Exception {
        started = Optional.of(LiveKernel.start(temporary, temporary, Map.of("COUNTWRIGHT_WORKER_OPTIONS", "-Xmx256m")));
    }

    @AfterAll
    static void end() throws Exception {
        kernel().close();
        TIMES.report();
    }

    static Stream<Loss> losses() {
        return Stream.of(
                new Loss("System.exit", "System.exit(3);", "System.exit(3)"),
                new Loss("Runtime.halt", "Runtime.getRuntime().halt(4);", "status 4"),
                new Loss("kill -9", KILL.formatted("-9"), "signal 9"),
                new Loss("kill -TERM", KILL.formatted("-TERM"), "signal 15"),
                new Loss(
                        "crash in native code",
                        "var field = Class.forName(\"sun.misc.Unsafe\").getDeclaredField(\"theUnsafe\");\n"
                                + "field.setAccessible(true); ((sun.misc.Unsafe) field.get(null)).putAddress(0, 1);",
                        "crashed in native code"),
                new Loss(
                        "System.exit in a thread left behind",
                        "new Thread(() -> System.exit(5)).start(); Thread.sleep(60_000);",
                        "System.exit(5)"),
                new Loss(
                        "stream to the kernel broken from inside",
                        "Object stage = Show.stage();\n"
                                + "Object hidden(Object owner, String name) throws Exception {"
                                + " var field = owner.getClass().getDeclaredField(name); field.setAccessible(true);"
                                + " return field.get(owner); }\n"
                                + "((java.io.OutputStream) hidden(hidden(hidden(stage, \"outbox\"), \"stream\"),"
                                + " \"out\")).close();\nThread.sleep(60_000);",
                        "closed from inside"));
    }

    @ParameterizedTest
    @MethodSource("losses")
    void loss_isToldWithItsCauseAndReplacedWithinASecond(Loss loss) throws Exception {
        TIMES.within(1.0, loss.what(), () -> {
            kernel().run("int lost = 1;");
            Message losing = kernel().begin(loss.code());
            assertThat(kernel().end(losing).error())
                    .contains("The worker that ran this cell is gone", loss.cause(), "A fresh worker is ready")
                    .contains("Session.restore()")
                    .doesNotContain("\tat ");
            return secondsToNextCell(kernel().repliedAt(losing));
        });
        assertThat(kernel().run("lost").error()).contains("'lost' is not known");
    }

    @Test
    void memoryFull_isToldAndTheNextCellRuns() throws Exception {
        TIMES.within(1.0, "memory filled by a list that is kept", () -> {
            Message filling = kernel().begin(
                            "List<long[]> hoard = new ArrayList<>();\nwhile (true) { hoard.add(new long[100_000]); }");
            assertThat(kernel().end(filling).error()).contains("memory");
            return secondsToNextCell(kernel().repliedAt(filling));
        });
        kernel().run("hoard = null;");
    }

    @Test
    void memoryFilledByThreads_isToldAndTheNextCellRuns() throws Exception {
        TIMES.within(1.0, "memory filled by threads left behind", () -> {
            Message filling = kernel().begin("for (int i = 0; i < 4; i++) new Thread(() -> { List<Object> all = new"
                    + " ArrayList<>(); while (true) { try { all.add(new long[1000]); } catch (OutOfMemoryError e) {"
                    + " Thread.yield(); } } }).start();\n"
                    + "List<Object> mine = new ArrayList<>(); while (true) mine.add(new long[10]);");
            assertThat(kernel().end(filling).error()).contains("memory");
            kernel().run("System.exit(0);");
            Message after = kernel().begin("1");
            kernel().end(after);
            return secondsToNextCell(kernel().repliedAt(after));
        });
    }

    @Test
    void stackOverflow_isToldAndKeepsVariables() throws Exception {
        kernel().run("int deep = 5; int dive(int n) { return dive(n + 1) + 1; }");
        TIMES.within(1.0, "stack overflow", () -> {
            Message diving = kernel().begin("dive(0)");
            assertThat(kernel().end(diving).error()).contains("StackOverflowError");
            return secondsToNextCell(kernel().repliedAt(diving));
        });
        assertThat(kernel().run("deep").value()).isEqualTo("5");
    }

    @Test
    void fileDescriptorsUsedUp_areToldAndTheNextCellRuns() throws Exception {
        TIMES.within(1.0, "file descriptors used up", () -> {
            Message opening = kernel().begin("List<Object> open = new ArrayList<>();\nwhile (true) {"
                    + " open.add(new java.io.FileInputStream(\"/dev/null\")); if (open.size() > 2_000_000) break; }");
            assertThat(kernel().end(opening).error()).contains("open files");
            return secondsToNextCell(kernel().repliedAt(opening));
        });
        kernel().run("System.exit(0);");
    }

    @Test
    void everyThreadInterrupted_cellsStillRun() throws Exception {
        TIMES.within(1.0, "every thread of the worker interrupted", () -> {
            Message interrupting = kernel().begin("Thread.getAllStackTraces().keySet().forEach(Thread::interrupt);");
            kernel().end(interrupting);
            return secondsToNextCell(kernel().repliedAt(interrupting));
        });
    }

    @Test
    void standardStreamsReplaced_laterCellsAreHeard() throws Exception {
        kernel().run("System.setOut(null); System.setErr(null); System.in.close(); System.setIn(null);");

        assertThat(kernel().run("System.out.println(\"heard\");").printed()).isEqualTo("heard\n");
    }

    @Test
    void haltedFromOutside_interruptReportsItAndTheSecondReplacesIt() throws Exception {
        TIMES.within(1.0, "kill -STOP, from the second interrupt", () -> {
            ProcessHandle worker = worker();
            Message halting = kernel().begin("{ System.out.println(\"going\"); while (true) {} }");
            kernel().awaitOutput(halting);
            int status = new ProcessBuilder("kill", "-STOP", Long.toString(worker.pid()))
                    .start()
                    .waitFor();
            assertThat(status).isZero();
            kernel().interrupt();
            kernel().complainedAt(halting, "interrupt again to end its worker");
            long again = System.nanoTime();
            kernel().interrupt();
            assertThat(kernel().end(halting).error()).contains("did not react to the interrupt");
            return secondsToNextCell(again);
        });
    }

    @Test
    void loss_betweenTwoCells_isToldByTheNext() throws Exception {
        TIMES.within(1.0, "killed between two cells, from the kill", () -> {
            kernel().run("int kept = 7;");
            ProcessHandle worker = worker();
            long killed = System.nanoTime();
            worker.destroyForcibly();
            Message next = kernel().begin("6 * 7");
            LiveKernel.Outcome outcome = kernel().end(next);
            // Where the next cell is quicker than the news, it is the one that is lost.
            assertThat(outcome.printed() + outcome.error()).contains("signal 9", "Session.restore()");
            return outcome.error().isEmpty()
                    ? FaultTimes.secondsBetween(killed, kernel().repliedAt(next))
                    : secondsToNextCell(kernel().repliedAt(next));
        });
    }

    @Test
    void loss_duringACompletion_isNoMatterOfTheCompletion() throws Exception {
        TIMES.within(1.0, "killed during a completion, to the next cell's reply", () -> {
            ProcessHandle worker = worker();
            Message asked = kernel().ask(
                            "complete_request",
                            JsonNodeFactory.instance
                                    .objectNode()
                                    .put("code", "Math.sq")
                                    .put("cursor_pos", 7));
            worker.destroyForcibly();
            JsonNode reply = kernel().reply(Channel.SHELL, asked);
            assertThat(reply.path("matches").toString()).contains("sqrt(");
            long answered = System.nanoTime();
            Message next = kernel().begin("6 * 7");
            LiveKernel.Outcome outcome = kernel().end(next);
            return outcome.error().isEmpty()
                    ? FaultTimes.secondsBetween(answered, kernel().repliedAt(next))
                    : secondsToNextCell(kernel().repliedAt(next));
        });
    }

    @Test
    void loss_whileTheSessionStarts_isToldOrMended(@TempDir Path folder) throws Exception {
        try (LiveKernel fresh = LiveKernel.start(folder, folder, Map.of())) {
            Message first = fresh.begin("6 * 7");
            long deadline = System.nanoTime() + TimeUnit.SECONDS.toNanos(30);
            while (fresh.workers().isEmpty() && System.nanoTime() < deadline) {
                Thread.onSpinWait();
            }
            assertThat(fresh.workers()).as("the worker that starts").isNotEmpty();
            fresh.workers().forEach(ProcessHandle::destroyForcibly);

            LiveKernel.Outcome outcome = fresh.end(first);

            assertThat(outcome.value() + outcome.error()).containsAnyOf("42", "worker");
            assertThat(fresh.run("6 * 7").value()).isEqualTo("42");
        }
    }

    private static ProcessHandle worker() throws Exception {
        return ProcessHandle.of(Long.parseLong(
                        kernel().run("ProcessHandle.current().pid()").value()))
                .orElseThrow();
    }

    private static double secondsToNextCell(long since) throws Exception {
        Message next = kernel().begin("6 * 7");
        assertThat(kernel().end(next).value()).isEqualTo("42");
        return FaultTimes.secondsBetween(since, kernel().repliedAt(next));
    }

    private static LiveKernel kernel() {
        return started.orElseThrow();
    }
}
