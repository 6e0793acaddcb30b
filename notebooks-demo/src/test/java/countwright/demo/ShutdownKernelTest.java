package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.Message;
import java.nio.file.Path;
import java.time.Duration;
import java.util.List;
import java.util.Map;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Whatever goes on, a kernel that is asked to end answers, is gone within a second, and leaves no worker behind. */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class ShutdownKernelTest {

    private static final Duration LIMIT = Duration.ofSeconds(1);

    @TempDir
    private Path folder = Path.of("");

    /** What is under way when the end is asked for. */
    enum UnderWay {
        /** The session is still starting. */
        START {
            @Override
            void begin(LiveKernel kernel) {}
        },
        NOTHING {
            @Override
            void begin(LiveKernel kernel) throws Exception {
                kernel.run("1 + 1");
            }
        },
        TIGHT_LOOP {
            @Override
            void begin(LiveKernel kernel) throws Exception {
                kernel.awaitOutput(kernel.begin("System.out.println(\"on\"); while (true) {}"));
            }
        },
        /** Opening a pipe that nobody writes to waits in the operating system, where Java cannot stop it. */
        NATIVE_CALL {
            @Override
            void begin(LiveKernel kernel) throws Exception {
                kernel.run("new ProcessBuilder(\"mkfifo\", \"pipe\").start().waitFor()");
                kernel.awaitOutput(
                        kernel.begin("System.out.println(\"on\"); new java.io.FileInputStream(\"pipe\").read()"));
            }
        },
        STOPPED_WORKER {
            @Override
            void begin(LiveKernel kernel) throws Exception {
                Message cell = kernel.begin("System.out.println(\"on\"); Thread.sleep(100_000);");
                kernel.awaitOutput(cell);
                for (ProcessHandle worker : kernel.workers()) {
                    assertThat(new ProcessBuilder("kill", "-STOP", Long.toString(worker.pid()))
                                    .start()
                                    .waitFor())
                            .isZero();
                }
            }
        };

        abstract void begin(LiveKernel kernel) throws Exception;
    }

    @ParameterizedTest
    @CsvSource({
        "START, CONTROL", "START, SHELL",
        "NOTHING, CONTROL", "NOTHING, SHELL",
        "TIGHT_LOOP, CONTROL", "TIGHT_LOOP, SHELL",
        "NATIVE_CALL, CONTROL", "NATIVE_CALL, SHELL",
        "STOPPED_WORKER, CONTROL", "STOPPED_WORKER, SHELL",
    })
    void shutdown_isAnswered_andTheKernelIsGoneWithinASecond(UnderWay underWay, Channel channel) throws Exception {
        try (LiveKernel kernel = LiveKernel.start(folder, folder, Map.of())) {
            underWay.begin(kernel);
            List<ProcessHandle> workers = kernel.workers();

            Duration taken = kernel.shutDown(channel);

            assertThat(taken).as("time from asking to the end of the process").isLessThan(LIMIT);
            for (ProcessHandle worker : workers) {
                worker.onExit().get(10, TimeUnit.SECONDS);
            }
        }
    }
}
