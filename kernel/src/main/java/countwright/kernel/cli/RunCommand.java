package countwright.kernel.cli;

import countwright.kernel.desk.KernelCommand;
import countwright.kernel.desk.NotebookRun;
import java.io.PrintWriter;
import java.nio.file.Path;
import java.util.Optional;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;

/** Runs a notebook without a front end. */
@Command(
        name = "run",
        description = {
            "Run a notebook from top to bottom, and write the executed copy and a report.",
            "",
            "The kernel works in the notebook's folder. The first cell that fails stops the run, unless it is tagged "
                    + "'raises-exception'; what was done until then is written all the same. The notebook itself is "
                    + "never changed.",
            ""
        },
        mixinStandardHelpOptions = true,
        exitCodeListHeading = "%nExit codes:%n",
        exitCodeList = {
            "0:Every cell ran.",
            "1:A cell failed; its error is shown.",
            "2:The notebook could not be run or the output not be written."
        })
final class RunCommand implements Callable<Integer> {

    @Parameters(paramLabel = "NOTEBOOK", description = "The notebook file (.ipynb, format 4).")
    private Path notebook = Path.of("");

    @Option(
            names = {"-o", "--output"},
            paramLabel = "DIR",
            description = "Where NOTEBOOK's executed copy (.ipynb) and report (.html) go; made if need be. "
                    + "Default: the folder 'out' beside the notebook.")
    private @Nullable Path output;

    @Spec
    private @Nullable CommandSpec spec;

    @Override
    public Integer call() {
        if (spec == null) {
            throw new IllegalStateException("the command line has not been set up.");
        }
        PrintWriter out = spec.commandLine().getOut();
        PrintWriter err = spec.commandLine().getErr();
        Path folder = Optional.ofNullable(output).orElseGet(() -> NotebookRun.defaultOutputFolder(notebook));
        NotebookRun run = NotebookRun.of(notebook, folder, KernelCommand.current());
        NotebookRun.Result result = run.run(new TerminalProgress(out, err, TerminalProgress.Ink.ofThisTerminal()));
        out.println();
        out.println("Notebook  " + result.executed());
        out.println("Report    " + result.report());
        out.flush();
        return result.stoppedAt().isPresent() ? Main.CELL_FAILED : Main.DONE;
    }
}
