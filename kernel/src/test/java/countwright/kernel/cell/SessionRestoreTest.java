package countwright.kernel.cell;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;

/** Running the cells of a lost session again, with a real worker. */
@Timeout(120)
class SessionRestoreTest {

    private static final String EXIT = "System.exit(3);";

    private final EngineUnderTest kernel = EngineUnderTest.start("128m");
    private final JShellEngine engine = kernel.engine();
    private int count;

    @TempDir
    private Path folder;

    @BeforeEach
    void startWithTwoCells() {
        succeed("int base = 40;");
        succeed("int twice(int n) { return 2 * n; }\nSystem.out.println(\"printed\");");
    }

    @AfterEach
    void close() {
        kernel.close();
    }

    /** Runs the next cell, numbered as in a notebook, and returns what it wrote to its streams. */
    private String succeed(String code) {
        Heard heard = new Heard();
        assertThat(run(code, heard)).as(code).isInstanceOf(CellOutcome.Success.class);
        return heard.out() + heard.err();
    }

    private CellOutcome.Failure fail(String code) {
        CellOutcome outcome = run(code, new Heard());
        assertThat(outcome).as(code).isInstanceOf(CellOutcome.Failure.class);
        return (CellOutcome.Failure) outcome;
    }

    private CellOutcome run(String code, Heard heard) {
        count++;
        return engine.evaluate(code, count, heard);
    }

    @Test
    void loss_offersToRestore() {
        fail("notThere");
        CellOutcome.Failure lost = fail(EXIT);

        assertThat(lost.traceback())
                .last()
                .isEqualTo("Session.restore() runs the 2 cells that had succeeded again, in order.");
        assertThat(kernel.resultOf("Session.restorableCells()")).isEqualTo("2");
    }

    @Test
    void restore_runsTheCellsBeforeTheNextStatementAndTellsOfEach() {
        fail(EXIT);
        Heard heard = new Heard();

        CellOutcome outcome = run("Session.restore();\ntwice(base)", heard);

        assertThat(outcome)
                .isInstanceOfSatisfying(
                        CellOutcome.Success.class,
                        success -> assertThat(success.result().orElseThrow().plainText())
                                .isEqualTo("80"));
        assertThat(heard.out())
                .contains("cell [1] run again", "cell [2] run again", "Restored 2 cells")
                .doesNotContain("printed");
    }

    @Test
    void restore_twice_runsThemOnce() {
        succeed("base++;");
        fail(EXIT);
        succeed("Session.restore();");

        assertThat(succeed("Session.restore();")).contains("nothing to restore");
        assertThat(kernel.resultOf("base")).isEqualTo("41");
    }

    @Test
    void restore_withoutLoss_doesNothing() {
        assertThat(succeed("base++; Session.restore();")).contains("nothing to restore");
        assertThat(kernel.resultOf("base")).isEqualTo("41");
    }

    @Test
    void restore_leavesOutWhatWasRunAgainByHandAndKeepsItsPlace() {
        fail(EXIT);
        succeed("int base = 40;");
        assertThat(succeed("Session.restore();")).contains("cell [2] run again", "Restored 1 cell");
        fail(EXIT);

        assertThat(succeed("Session.restore();")).contains("cell [4] run again", "cell [2] run again");
    }

    @Test
    void restore_stopsAtTheFirstFailureAndGoesOnThereTheNextTime() {
        Path mark = folder.resolve("mark");
        succeed("Files.createFile(Path.of(\"" + mark + "\"));");
        succeed("int last = base + 2;");
        fail(EXIT);

        CellOutcome.Failure failure = fail("Session.restore();");

        assertThat(failure.name()).isEqualTo("FileAlreadyExistsException");
        assertThat(failure.traceback())
                .first()
                .isEqualTo("Session.restore() stopped at cell [3], which failed when it was run again:");
        assertThat(failure.traceback().toString())
                .contains("in cell [3], line 1")
                .contains("goes on with cell [3]");
        assertThat(fail("last").name()).isEqualTo("CompileError");
        assertThat(mark.toFile().delete()).isTrue();
        assertThat(succeed("Session.restore();")).contains("Restored 2 cells").doesNotContain("cell [1]");
        assertThat(kernel.resultOf("last")).isEqualTo("42");
    }

    @Test
    void restore_interrupted_goesOnWhereItWasStopped() throws Exception {
        succeed("boolean slow = java.nio.file.Files.exists(Path.of(\"" + folder.resolve("slow") + "\"));\n"
                + "while (slow) { Thread.sleep(10); }");
        succeed("int last = 7;");
        assertThat(folder.resolve("slow").toFile().createNewFile()).isTrue();
        fail(EXIT);
        Heard heard = new Heard();
        CompletableFuture<CellOutcome> restoring =
                CompletableFuture.supplyAsync(() -> run("System.out.println(1); Session.restore();", heard));
        while (!heard.out().contains("cell [2] run again")) {
            assertThat(heard.awaitSomething()).isTrue();
            Thread.onSpinWait();
        }
        engine.interrupt();
        assertThat(restoring.get(30, TimeUnit.SECONDS))
                .isInstanceOfSatisfying(
                        CellOutcome.Failure.class,
                        failure -> assertThat(failure.name()).isEqualTo("Interrupted"));
        assertThat(heard.out()).contains("Restored 2 of 4 cells; stopped at cell [3]");
        assertThat(folder.resolve("slow").toFile().delete()).isTrue();

        assertThat(succeed("Session.restore();")).contains("Restored 2 cells");
        assertThat(kernel.resultOf("base + last")).isEqualTo("47");
    }

    @Test
    void restore_inWhichTheWorkerIsLostAgain_isToldAndCanBeTriedAgain() {
        Path mark = folder.resolve("mark");
        succeed("if (!Path.of(\"" + mark + "\").toFile().createNewFile()) System.exit(9);");
        fail(EXIT);

        CellOutcome.Failure failure = fail("Session.restore();");

        assertThat(failure.name()).isEqualTo("WorkerLost");
        assertThat(failure.traceback().toString())
                .contains("stopped at cell [3]", "System.exit(9)", "Session.restore() runs the 3 cells");
        assertThat(mark.toFile().delete()).isTrue();
        assertThat(succeed("Session.restore();")).contains("Restored 3 cells");
    }

    @Test
    void redirectedStreams_doNotReachTheNextCellRunAgain() {
        succeed("System.setOut(null);");
        succeed("System.out.println(base);");
        fail(EXIT);

        assertThat(succeed("Session.restore();")).contains("Restored 4 cells");
    }

    @Test
    void cellsThatRestore_areNotRunAgain() {
        fail(EXIT);
        succeed("Session.restore();");
        fail(EXIT);

        assertThat(succeed("Session.restore();")).contains("Restored 2 cells");
    }
}
