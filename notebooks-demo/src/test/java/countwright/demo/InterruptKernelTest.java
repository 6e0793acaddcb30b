package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Message;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.stream.Stream;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;

/** An interrupt ends whatever Java code runs within a second, and keeps the variables. */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class InterruptKernelTest {

    private static final FaultTimes TIMES = new FaultTimes("Interrupt: seconds to the reply of the cell");
    private static final String RUNNING = "System.out.println(\"running\"); ";

    @TempDir
    private static Path temporary;

    private static Optional<LiveKernel> started = Optional.empty();

    /** A way for a cell not to end. Its last statement prints before it hangs, so that it is sure to be under way. */
    record Hang(String what, String preparation, String code) {

        @Override
        public String toString() {
            return what;
        }
    }

    @BeforeAll
    static void start() throws Exception {
        started = Optional.of(LiveKernel.start(
                temporary,
                temporary,
                Map.of("COUNTWRIGHT_WORKER_OPTIONS", System.getProperty("countwright.test.options", "-Xmx512m"))));
        kernel().run("int kept = 5;");
    }

    @AfterAll
    static void end() throws Exception {
        kernel().close();
        TIMES.report();
    }

    static Stream<Hang> hangs() {
        return Stream.of(
                new Hang("tight loop", "", "{ " + RUNNING + "while (true) {} }"),
                new Hang(
                        "loop in a method of an earlier cell",
                        "void spin() { " + RUNNING + "while (true) {} }",
                        "spin();"),
                new Hang("sleep", "", "{ " + RUNNING + "Thread.sleep(60_000); }"),
                new Hang(
                        "monitor that a sleeping thread holds",
                        holder("Thread.sleep(60_000)"),
                        "{ " + RUNNING + "synchronized (lock) { System.out.println(\"entered\"); } }"),
                new Hang(
                        "monitor that a looping thread holds",
                        holder("while (\"\".isEmpty()) {}"),
                        "{ " + RUNNING + "synchronized (lock) { System.out.println(\"entered\"); } }"),
                new Hang(
                        "ReentrantLock that another thread holds",
                        "var lock = new java.util.concurrent.locks.ReentrantLock();\n"
                                + "var holder = new Thread(lock::lock); holder.start(); holder.join();",
                        "{ " + RUNNING + "lock.lock(); }"),
                new Hang("park", "", "{ " + RUNNING + "while (true) java.util.concurrent.locks.LockSupport.park(); }"),
                new Hang(
                        "loop that catches Throwable",
                        "",
                        "{ " + RUNNING
                                + "while (true) { try { while (true) Math.sqrt(2); } catch (Throwable t) {} } }"),
                new Hang(
                        "loop that sleeps and catches Throwable",
                        "",
                        "{ " + RUNNING + "while (true) { try { Thread.sleep(50); } catch (Throwable t) {} } }"),
                new Hang(
                        "loop that waits and catches Throwable",
                        "",
                        "{ " + RUNNING + "while (true) { try {"
                                + " new java.util.concurrent.CountDownLatch(1).await(); } catch (Throwable t) {} } }"),
                new Hang(
                        "parallel stream of endless tasks",
                        "",
                        "IntStream.range(0, 1000).parallel().forEach(i -> { " + RUNNING + "while (true) {} });"),
                new Hang(
                        "long model fit",
                        "int rows = 400_000; var random = new Random(1);\n"
                                + "String[] depot = new String[rows]; double[] age = new double[rows]; double[] faults = new"
                                + " double[rows];\n"
                                + "for (int i = 0; i < rows; i++) { depot[i] = \"depot \" + random.nextInt(100);"
                                + " age[i] = random.nextDouble(); faults[i] = random.nextInt(5); }\n"
                                + "Table log = Table.of(texts(\"depot\", depot), numbers(\"age\", age), numbers(\"faults\","
                                + " faults));",
                        "{ " + RUNNING + "CountModel.of(\"faults\").on(levels(\"depot\"), linear(\"age\"),"
                                + " interaction(linear(\"age\"), levels(\"depot\"))).fit(log); }"),
                new Hang(
                        "toString of a result that never ends",
                        "class Endless { public String toString() { " + RUNNING + "while (true) {} } }",
                        "new Endless()"),
                new Hang(
                        "getMessage of an exception that never ends",
                        "class Silent extends RuntimeException { public String getMessage() { " + RUNNING
                                + "while (true) {} } }",
                        "throw new Silent();"),
                new Hang(
                        "read from a socket",
                        "var server = new java.net.ServerSocket(0);"
                                + " var client = new java.net.Socket(\"localhost\", server.getLocalPort());",
                        "{ " + RUNNING + "client.getInputStream().read(); }"),
                new Hang(
                        "wait for a connection",
                        "var lonely = new java.net.ServerSocket(0);",
                        "{ " + RUNNING + "lonely.accept(); }"),
                new Hang(
                        "wait for a Future",
                        "var executor = java.util.concurrent.Executors.newSingleThreadExecutor();",
                        "{ " + RUNNING + "executor.submit(() -> { Thread.sleep(60_000); return 1; }).get(); }"),
                new Hang(
                        "wait for another process",
                        "",
                        "{ " + RUNNING + "new ProcessBuilder(\"sleep\", \"60\").start().waitFor(); }"),
                new Hang("flood of output", "", "while (true) System.out.println(\"running\");"));
    }

    private static String holder(String holding) {
        return "Object lock = new Object(); var held = new java.util.concurrent.CountDownLatch(1);\n"
                + "new Thread(() -> { synchronized (lock) { held.countDown();"
                + " try { " + holding + "; } catch (Exception e) {} } }).start(); held.await();";
    }

    @ParameterizedTest
    @MethodSource("hangs")
    void interrupt_endsWithinASecondAndKeepsVariables(Hang hang) throws Exception {
        TIMES.within(1.0, hang.what(), () -> {
            assertThat(kernel().run(hang.preparation()).error()).isEmpty();
            Message cell = kernel().begin(hang.code());
            kernel().awaitOutput(cell);
            long interrupted = System.nanoTime();
            kernel().interrupt();
            assertThat(kernel().end(cell).error()).contains("Interrupted", "Variables are kept");
            assertThat(kernel().run("kept").value()).isEqualTo("5");
            return FaultTimes.secondsBetween(interrupted, kernel().repliedAt(cell));
        });
    }

    @Test
    void parallelStream_isOverInItsPoolToo() throws Exception {
        kernel().run("var turns = new java.util.concurrent.atomic.LongAdder();");
        Message cell = kernel().begin("IntStream.range(0, 1000).parallel().forEach(i -> { " + RUNNING
                + "while (true) turns.increment(); });");
        kernel().awaitOutput(cell);
        kernel().interrupt();
        kernel().end(cell);

        String left = kernel().run("long seen = turns.sum(); Thread.sleep(200); turns.sum() - seen")
                .value();

        assertThat(left).as("turns of the loop after the cell").isEqualTo("0");
    }

    @Test
    void waitForInput_ends() throws Exception {
        TIMES.within(1.0, "wait for input", () -> {
            Message cell = kernel().beginAsking("ask(\"How many?\")");
            kernel().awaitQuestion(cell);
            long interrupted = System.nanoTime();
            kernel().interrupt();
            assertThat(kernel().end(cell).error()).contains("Interrupted");
            assertThat(kernel().run("kept").value()).isEqualTo("5");
            return FaultTimes.secondsBetween(interrupted, kernel().repliedAt(cell));
        });
    }

    @Test
    void toStringThatThrows_isReportedAndKeepsVariables() throws Exception {
        kernel().run("class Sour { public String toString() { throw new IllegalStateException(\"no words\"); } }");
        TIMES.within(1.0, "toString of a result that throws, to the report", () -> {
            long sent = System.nanoTime();
            Message cell = kernel().begin("new Sour()");
            LiveKernel.Outcome outcome = kernel().end(cell);
            assertThat(outcome.error() + outcome.value()).contains("no words");
            assertThat(kernel().run("kept").value()).isEqualTo("5");
            return FaultTimes.secondsBetween(sent, kernel().repliedAt(cell));
        });
    }

    @Test
    void getMessageThatThrows_isReportedAndKeepsVariables() throws Exception {
        kernel().run("class Mute extends RuntimeException {"
                + " public String getMessage() { throw new IllegalStateException(); } }");
        TIMES.within(1.0, "getMessage of an exception that throws, to the report", () -> {
            long sent = System.nanoTime();
            Message cell = kernel().begin("throw new Mute();");
            assertThat(kernel().end(cell).error()).contains("Mute", "getMessage threw");
            assertThat(kernel().run("kept").value()).isEqualTo("5");
            return FaultTimes.secondsBetween(sent, kernel().repliedAt(cell));
        });
    }

    @Test
    void nativeCode_isReportedAndASecondInterruptReplacesTheWorker() throws Exception {
        TIMES.within(2.5, "native code, to the report that it does not react", () -> {
            Message cell = beginOpeningPipe();
            long interrupted = System.nanoTime();
            kernel().interrupt();
            long told = kernel().complainedAt(cell, "interrupt again to end its worker; the variables are lost then");
            kernel().interrupt();
            assertThat(kernel().end(cell).error())
                    .contains("did not react to the interrupt", "A fresh worker is ready", "Session.restore()");
            return FaultTimes.secondsBetween(interrupted, told);
        });
        TIMES.within(1.0, "native code, from the second interrupt to the next cell's reply", () -> {
            Message cell = beginOpeningPipe();
            kernel().interrupt();
            kernel().complainedAt(cell, "interrupt again");
            long interrupted = System.nanoTime();
            kernel().interrupt();
            kernel().end(cell);
            Message next = kernel().begin("6 * 7");
            assertThat(kernel().end(next).value()).isEqualTo("42");
            return FaultTimes.secondsBetween(interrupted, kernel().repliedAt(next));
        });
        kernel().run("int kept = 5;");
    }

    /** Opening a pipe that nobody writes to waits in the operating system, where no Java means reaches. */
    private static Message beginOpeningPipe() throws Exception {
        Path pipe = temporary.resolve("pipe");
        if (Files.notExists(pipe)) {
            assertThat(new ProcessBuilder(List.of("mkfifo", pipe.toString()))
                            .start()
                            .waitFor())
                    .isZero();
        }
        kernel().run("int kept = 5;");
        Message cell = kernel().begin("{ " + RUNNING + "new java.io.FileInputStream(\"" + pipe + "\"); }");
        kernel().awaitOutput(cell);
        return cell;
    }

    private static LiveKernel kernel() {
        return started.orElseThrow();
    }
}
