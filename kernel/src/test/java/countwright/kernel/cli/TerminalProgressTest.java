package countwright.kernel.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.PrintWriter;
import java.io.StringWriter;
import java.time.Duration;
import java.util.List;
import org.junit.jupiter.api.Test;

class TerminalProgressTest {

    private final StringWriter out = new StringWriter();
    private final StringWriter err = new StringWriter();

    @Test
    void goodCell_isOneLineOfFixedWidth() {
        TerminalProgress progress = progress(TerminalProgress.Ink.PLAIN);
        progress.started(3, 14, "Look at the rates");
        progress.finished(Duration.ofMillis(420));
        progress.started(4, 14, "x".repeat(200));
        progress.finished(Duration.ofSeconds(65));

        assertThat(out.toString().lines().toList())
                .satisfiesExactly(
                        line -> assertThat(line)
                                .startsWith("[ 3/14] Look at the rates ...")
                                .endsWith("... 0.4 s"),
                        line -> assertThat(line).startsWith("[ 4/14] xxx").endsWith("x... ... 65.0 s"));
        assertThat(out.toString()).doesNotContain("\u001B");
    }

    @Test
    void failedCell_showsNumberAndErrorOnTheErrorStream() {
        TerminalProgress progress = progress(TerminalProgress.Ink.COLOURED);
        progress.started(2, 3, "Read");
        progress.failed(Duration.ofMillis(50), List.of("IllegalArgumentException: no such file", "  at line 1"));

        assertThat(out.toString()).contains("\u001B[31mfailed\u001B[0m after 0.1 s");
        assertThat(err.toString())
                .contains("Cell 2 of 3 failed:")
                .contains("  IllegalArgumentException: no such file\n    at line 1")
                .contains("The run stopped here");
    }

    private TerminalProgress progress(TerminalProgress.Ink ink) {
        return new TerminalProgress(new PrintWriter(out), new PrintWriter(err), ink);
    }
}
