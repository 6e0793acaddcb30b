package countwright.kernel.desk;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;

@Timeout(60)
class NotebookRunTest {

    @TempDir
    private Path temporary;

    private Path folder = Path.of("");
    private final Heard heard = new Heard();

    @BeforeEach
    void makeFolder() throws IOException {
        folder = Files.createDirectory(temporary.resolve("note books"));
    }

    @Test
    void run_allCellsGood_writesCopyAndReport() throws IOException {
        Path source = source(Notebooks.ofCode("# first\nprint one\nprint two", "   ", "value 42", "folder"));
        String before = Files.readString(source);

        NotebookRun.Result result = run(source);

        assertThat(result.stoppedAt()).isEmpty();
        assertThat(result.executed()).isEqualTo(folder.resolve("out/n.ipynb"));
        assertThat(heard.lines).containsExactly("1/3 # first", "done", "2/3 value 42", "done", "3/3 folder", "done");
        String json = Files.readString(result.executed());
        assertThat(NotebookRules.brokenBy(json)).isEmpty();
        Notebook executed = Notebook.parse(json, "n");
        assertThat(outputs(executed, 0)).containsExactly(new Output.Text("stdout", "one\ntwo\n"));
        assertThat(outputs(executed, 1)).isEmpty();
        assertThat(((Cell.Code) executed.cells().get(2)).executionCount()).hasValue(2);
        assertThat(outputs(executed, 3)).containsExactly(new Output.Text("stdout", "note books\n"));
        assertThat(executed.metadata().path("kernelspec").path("name").stringValue())
                .isEqualTo("countwright");
        assertThat(executed.metadata().path("language_info").path("version").stringValue())
                .isEqualTo("17.0.1");
        assertThat(result.report()).content().contains("Countwright 9.8.7 on Java 17.0.1", ">42</pre>");
        assertThat(source).hasContent(before);
    }

    @Test
    void run_cellFails_stopsThereAndStillWrites() {
        NotebookRun.Result result = run(source(Notebooks.ofCode("print before", "print half\nfail", "print never")));

        assertThat(result.stoppedAt()).hasValue(2);
        assertThat(heard.lines).endsWith("2/3 print half", "failed Broken: on order|  at line 1");
        Notebook executed = Notebook.read(result.executed());
        assertThat(outputs(executed, 0)).hasSize(1);
        assertThat(outputs(executed, 1)).hasSize(2).last().isInstanceOf(Output.Failed.class);
        assertThat(outputs(executed, 2)).isEmpty();
        assertThat(result.report()).content().contains("stopped at code cell 2");
    }

    @Test
    void run_cellMayFail_goesOn() {
        var metadata = Notebooks.object();
        metadata.putArray("tags").add("raises-exception");
        Cell.Code tagged = new Cell.Code("a", "fail", metadata, java.util.OptionalInt.empty(), List.of());
        Notebook notebook = Notebooks.of(tagged, Notebooks.code("b", "print after"));

        NotebookRun.Result result = run(source(notebook));

        assertThat(result.stoppedAt()).isEmpty();
        assertThat(outputs(Notebook.read(result.executed()), 1)).containsExactly(new Output.Text("stdout", "after\n"));
    }

    @Test
    void run_kernelDies_isTheErrorOfTheCell() {
        NotebookRun.Result result = run(source(Notebooks.ofCode("print last words\ndie", "print never")));

        assertThat(result.stoppedAt()).hasValue(1);
        assertThat(heard.lines).last().asString().contains("exit code was 7").contains("dies on order");
        assertThat(outputs(Notebook.read(result.executed()), 0)).last().isInstanceOf(Output.Failed.class);
    }

    @Test
    void run_clearedAndRenewedOutput_isWhatAFrontEndWouldShow() {
        NotebookRun.Result result = run(source(Notebooks.ofCode(
                "print gone\nclear now\nshow old",
                "print kept\nclear wait\nrenew new",
                "print x\nclear wait\nprint y")));

        Notebook executed = Notebook.read(result.executed());
        assertThat(outputs(executed, 0))
                .singleElement()
                .isInstanceOfSatisfying(
                        Output.Shown.class,
                        shown -> assertThat(shown.data().path("text/plain").stringValue())
                                .isEqualTo("new"));
        assertThat(outputs(executed, 1)).containsExactly(new Output.Text("stdout", "kept\n"));
        assertThat(outputs(executed, 2)).containsExactly(new Output.Text("stdout", "y\n"));
    }

    @Test
    void run_kernelDoesNotStart_showsWhatItWrote() {
        KernelCommand broken = KernelCommand.of(
                List.of(Path.of(System.getProperty("java.home"), "bin", "java").toString(), "no.such.Main"));
        NotebookRun run = NotebookRun.of(source(Notebooks.ofCode("x")), folder.resolve("out"), broken);

        assertThatThrownBy(() -> run.run(heard))
                .isInstanceOf(DeskException.class)
                .hasMessageContaining("ended before it was ready")
                .hasMessageContaining("no.such.Main");
    }

    @Test
    void of_outputBesideTheSource_isRefused() {
        Path source = source(Notebooks.ofCode("x"));

        assertThatThrownBy(() -> NotebookRun.of(source, folder.resolve("out/.."), ScriptedKernel.command()))
                .isInstanceOf(DeskException.class)
                .hasMessageContaining("would overwrite")
                .hasMessageContaining("--output");
    }

    @Test
    void of_outputFolderIsAFile_isRefused() {
        Path source = source(Notebooks.ofCode("x"));

        assertThatThrownBy(() -> NotebookRun.of(source, source, ScriptedKernel.command()))
                .isInstanceOf(DeskException.class)
                .hasMessageContaining("cannot be made");
    }

    private Path source(Notebook notebook) {
        Path file = folder.resolve("n.ipynb");
        notebook.write(file);
        return file;
    }

    private NotebookRun.Result run(Path source) {
        return NotebookRun.of(source, NotebookRun.defaultOutputFolder(source), ScriptedKernel.command())
                .run(heard);
    }

    private static List<Output> outputs(Notebook notebook, int cell) {
        return ((Cell.Code) notebook.cells().get(cell)).outputs();
    }

    private static final class Heard implements RunProgress {

        private final List<String> lines = new ArrayList<>();

        @Override
        public void started(int number, int total, String label) {
            lines.add(number + "/" + total + " " + label);
        }

        @Override
        public void finished(Duration duration) {
            lines.add("done");
        }

        @Override
        public void failed(Duration duration, List<String> errorLines) {
            lines.add("failed " + String.join("|", errorLines));
        }
    }
}
