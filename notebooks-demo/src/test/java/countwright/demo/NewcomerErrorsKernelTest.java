package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.Map;
import java.util.Optional;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** What a newcomer gets wrong first: each message names the thing, the place and the remedy, and no line of ours. */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class NewcomerErrorsKernelTest {

    @TempDir
    private static Path temporary;

    private static Optional<LiveKernel> started = Optional.empty();

    @BeforeAll
    static void start() throws Exception {
        started = Optional.of(LiveKernel.start(Demo.notebooks(), temporary, Map.of()));
        assertThat(run("""
                Table log = Table.read("data/door-faults.csv");
                Table running = log.where(row -> row.number("kilometres") > 0);
                """).error()).isEmpty();
    }

    @AfterAll
    static void end() {
        started.orElseThrow().close();
    }

    @Test
    void missingFile_namesFolderNearFileAndRemedy() throws Exception {
        assertThat(messageOf("Table.read(\"data/door-fautls.csv\")"))
                .contains("no file 'data/door-fautls.csv'")
                .contains("in " + Demo.notebooks().resolve("data"))
                .contains("Did you mean 'door-faults.csv'?")
                .contains("working folder " + Demo.notebooks())
                .contains(", line 1:   Table.read(\"data/door-fautls.csv\")");
    }

    @Test
    void missingFolder_namesFolderAndWhatThereIsInstead() throws Exception {
        assertThat(messageOf("Table.read(\"date/door-faults.csv\")"))
                .contains("there is no folder " + Demo.notebooks().resolve("date"))
                .contains("data/")
                .contains("Correct the path");
    }

    @Test
    void misspeltColumn_namesFileNearColumnAndAllColumns() throws Exception {
        assertThat(messageOf("""
                CountModel.of("faults")
                    .exposure("kilometres")
                    .on(linear("aeg"))
                    .fit(running)"""))
                .contains("there is no column 'aeg' in door-faults.csv")
                .contains("Did you mean 'age'?")
                .contains("month, vehicle, depot, doorType, age, temperature, kilometres, faults")
                .contains(", line ");
    }

    @Test
    void misspeltColumnInLambda_namesTheSame() throws Exception {
        assertThat(messageOf("log.where(row -> row.number(\"kilometre\") > 0)"))
                .contains("there is no column 'kilometre' in door-faults.csv", "Did you mean 'kilometres'?")
                .contains(", line 1, in a lambda");
    }

    @Test
    void negativeCount_namesRowColumnValueAndRemedy() throws Exception {
        assertThat(messageOf("""
                var wrong = running.with("faults", row -> row.index() == 2 ? -1 : row.number("faults"));
                CountModel.of("faults").exposure("kilometres").on(linear("age")).fit(wrong)"""))
                .contains("row 3 of column 'faults' in door-faults.csv is -1")
                .contains("a count cannot be negative")
                .contains("table.where(row -> row.number(\"faults\") >= 0)")
                .contains(", line 2:");
    }

    @Test
    void zeroExposure_namesRowColumnHowManyAndRemedy() throws Exception {
        assertThat(messageOf("CountModel.of(\"faults\").exposure(\"kilometres\").on(linear(\"age\")).fit(log)"))
                .contains("row 168 of column 'kilometres' in door-faults.csv is 0 (and 5 more like it)")
                .contains("exposure must be positive")
                .contains("table.where(row -> row.number(\"kilometres\") > 0)");
    }

    @Test
    void textAsNumber_namesColumnAndTheTermToUse() throws Exception {
        assertThat(messageOf("CountModel.of(\"faults\").on(linear(\"depot\")).fit(running)"))
                .contains("linear(\"depot\") needs a column of numbers")
                .contains("'depot' in door-faults.csv holds text")
                .contains("Use levels(\"depot\")");
        assertThat(messageOf("running.numbers(\"depot\")"))
                .contains("column 'depot' of door-faults.csv holds text, not numbers: row 1 is 'Harbour'")
                .contains("Correct that value in the file")
                .contains("levels(\"depot\")");
    }

    @Test
    void missingSemicolon_pointsAtItsPlace() throws Exception {
        assertThat(messageOf("int first = 1\nint second = 2;"))
                .contains(", line 1, column 14\n    int first = 1\n                 ^\n")
                .contains("A semicolon is missing here.")
                .contains("Only the last expression of a cell may go without one");
    }

    @Test
    void undefinedVariable_pointsAtItAndAsksForTheNearOne() throws Exception {
        assertThat(messageOf("runing.summary()"))
                .contains(", line 1, column 1\n    runing.summary()\n    ^^^^^^\n")
                .contains("'runing' is not known")
                .contains("Did you mean 'running'?");
    }

    private static String messageOf(String code) throws InterruptedException {
        String message = run(code).error();
        assertThat(message)
                .as("no frame and no class of the inside is shown")
                .isNotBlank()
                .doesNotContain("\tat ", "REPL", "jdk.", "countwright.");
        return message;
    }

    private static LiveKernel.Outcome run(String code) throws InterruptedException {
        return started.orElseThrow().run(code);
    }
}
