package countwright.kernel.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class MainTest {

    private final StringWriter out = new StringWriter();
    private final StringWriter err = new StringWriter();

    @Test
    void noCommand_isAUsageErrorThatListsThem() {
        assertThat(execute()).isEqualTo(2);
        assertThat(err.toString()).contains("Which command?", "run", "register", "unregister", "connect");
        assertThat(out.toString()).isEmpty();
    }

    @Test
    void unknownCommand_isNamed() {
        assertThat(execute("regster")).isEqualTo(2);
        assertThat(err.toString()).contains("'regster'").contains("register");
    }

    @Test
    void run_withoutNotebook_isAUsageError() {
        assertThat(execute("run")).isEqualTo(2);
        assertThat(err.toString()).contains("NOTEBOOK");
    }

    @Test
    void run_missingNotebook_saysSoInOneLine() {
        assertThat(execute("run", "no such.ipynb")).isEqualTo(2);
        assertThat(err.toString())
                .isEqualToNormalizingNewlines(
                        "countwright: there is no notebook no such.ipynb. Check the name and the folder.\n");
    }

    @Test
    void register_outsideADistribution_saysHow(@TempDir Path prefix) {
        assertThat(execute("register", "--prefix", prefix.toString())).isEqualTo(2);
        assertThat(err.toString()).contains("bin/countwright");
    }

    @Test
    void unregister_prefixThatIsNotThere_isNamed(@TempDir Path folder) {
        assertThat(execute("unregister", "--prefix", folder.resolve("gone").toString()))
                .isEqualTo(2);
        assertThat(err.toString()).contains("gone is not a folder");
    }

    @Test
    void unregister_notRegistered_saysSoAndIsDone(@TempDir Path prefix) {
        assertThat(execute("unregister", "--prefix", prefix.toString())).isZero();
        assertThat(out.toString()).contains("not registered in " + prefix);
    }

    @Test
    void version_namesProductAndJava() {
        assertThat(execute("--version")).isZero();
        assertThat(out.toString())
                .containsPattern("Countwright \\d+\\.\\d+\\.\\d+")
                .contains("Java ");
    }

    @Test
    void help_ofRun_tellsExitCodes() {
        assertThat(execute("help", "run")).isZero();
        assertThat(out.toString()).contains("--output", "Exit codes:", "A cell failed");
    }

    private int execute(String... arguments) {
        return Main.execute(new PrintWriter(out, true), new PrintWriter(err, true), arguments);
    }
}
