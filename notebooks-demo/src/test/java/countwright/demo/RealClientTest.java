package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** The finished distribution, registered into a folder of its own, as the protocol's reference client sees it. */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class RealClientTest {

    private static final Path LAUNCHER = Path.of(System.getProperty("countwright.distribution", ""), "bin/countwright");

    @TempDir
    private static Path temporary;

    private ReferenceClient client;

    /** Before each test, not once: a class given up as a whole would not be reported as skipped. */
    @BeforeEach
    void findClient() {
        client = ReferenceClient.ofThisMachine();
        assertThat(LAUNCHER).as("built by 'mvn -B verify' before this module").isExecutable();
    }

    @Nested
    class Registering {

        @Test
        void registered_isSeenAtOnce_andGoneWhenRemoved() throws IOException {
            Path prefix = Files.createDirectory(temporary.resolve("a prefix"));

            String first = launch("register", prefix);
            client.plays(jupyter(prefix), "seen");
            String second = launch("register", prefix);
            client.plays(jupyter(prefix), "seen");
            String third = launch("unregister", prefix);
            client.plays(jupyter(prefix), "not_seen");

            assertThat(first).startsWith("Registered");
            assertThat(second).startsWith("Replaced");
            assertThat(third).startsWith("Removed");
        }
    }

    @Nested
    class Registered {

        @ParameterizedTest
        @ValueSource(
                strings = {
                    "kernel_info",
                    "ipc",
                    "rich_display",
                    "stdin",
                    "questions",
                    "interrupt",
                    "shutdown",
                    "restart"
                })
        void scene_isPlayedToItsEnd(String scene) throws IOException {
            client.plays(jupyter(registered()), scene);
        }

        /** The program itself fails if a test of the suite is skipped or missing. */
        @Test
        void referenceKernelSuite_passesWhole() throws IOException {
            assertThat(client.runs(jupyter(registered()), "kernel_suite.py"))
                    .contains("test_recv_iopub_welcome_msg", "test_history", "test_pager")
                    .doesNotContain("skipped");
        }

        @Test
        void tramDoors_runsInTheReferenceRunner() throws IOException {
            client.plays(
                    jupyter(registered()),
                    "notebook",
                    "tram-doors.ipynb",
                    temporary.resolve("tram-doors.ipynb").toString());

            assertThat(temporary.resolve("tram-doors.ipynb")).isNotEmptyFile();
        }

        private Path registered() throws IOException {
            Path prefix = Files.createDirectories(temporary.resolve("registered"));
            if (Files.notExists(jupyter(prefix))) {
                launch("register", prefix);
            }
            return prefix;
        }
    }

    private static Path jupyter(Path prefix) {
        return prefix.resolve("share/jupyter");
    }

    private static String launch(String command, Path prefix) throws IOException {
        Map<String, String> sameJava = Map.of("JAVA_HOME", System.getProperty("java.home"));
        ReferenceClient.Ending ending =
                ReferenceClient.run(List.of(LAUNCHER.toString(), command, "--prefix", prefix.toString()), sameJava);
        assertThat(ending.status()).as(ending.said()).isZero();
        return ending.said();
    }
}
