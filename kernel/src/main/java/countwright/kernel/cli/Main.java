package countwright.kernel.cli;

import countwright.kernel.desk.DeskException;
import java.io.OutputStreamWriter;
import java.io.PrintStream;
import java.io.PrintWriter;
import java.nio.charset.Charset;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.Spec;

/** The program {@code countwright}. */
@Command(
        name = "countwright",
        description = "A notebook kernel in Java for modelling counts and rates.",
        mixinStandardHelpOptions = true,
        versionProvider = ProductVersion.class,
        synopsisSubcommandLabel = "COMMAND",
        subcommands = {
            RunCommand.class,
            RegisterCommand.class,
            UnregisterCommand.class,
            ConnectCommand.class,
            CommandLine.HelpCommand.class
        },
        exitCodeListHeading = "%nExit codes:%n",
        exitCodeList = {
            "0:The command did its work.",
            "1:A cell of the notebook failed.",
            "2:The command could not run: wrong usage, or something outside the notebook."
        })
public final class Main implements Runnable {

    static final int DONE = 0;
    static final int CELL_FAILED = 1;
    static final int COULD_NOT_RUN = 2;

    @Spec
    private @Nullable CommandSpec spec;

    /** Runs a command and ends the process with its exit code. */
    public static void main(String[] arguments) {
        PrintWriter out = writer(System.out);
        PrintWriter err = writer(System.err);
        int exitCode = execute(out, err, arguments);
        out.flush();
        err.flush();
        System.exit(exitCode);
    }

    /**
     * Writes in the terminal's own encoding, but never in ASCII: a system without a locale, as in a container, says ASCII
     * where the terminal at the other end shows UTF-8.
     */
    private static PrintWriter writer(PrintStream stream) {
        String named = System.getProperty("stdout.encoding", System.getProperty("native.encoding", "UTF-8"));
        Charset charset = Charset.isSupported(named) ? Charset.forName(named) : StandardCharsets.UTF_8;
        return new PrintWriter(
                new OutputStreamWriter(
                        stream, charset.equals(StandardCharsets.US_ASCII) ? StandardCharsets.UTF_8 : charset),
                true);
    }

    /** Runs a command and returns its exit code. */
    static int execute(PrintWriter out, PrintWriter err, String... arguments) {
        if (arguments.length == 2 && arguments[0].equals("connect") && !arguments[1].startsWith("-")) {
            // A front end waits for this one, and to set up the command line takes as long as to start the kernel.
            try {
                return ConnectCommand.serve(Path.of(arguments[1]));
            } catch (RuntimeException e) {
                return explain(e, err);
            }
        }
        return new CommandLine(new Main())
                .setOut(out)
                .setErr(err)
                .setExecutionExceptionHandler((failure, command, parsed) -> explain(failure, command.getErr()))
                .execute(arguments);
    }

    @Override
    public void run() {
        if (spec == null) {
            throw new IllegalStateException("the command line has not been set up.");
        }
        throw new ParameterException(spec.commandLine(), "Which command? Name one of those below.");
    }

    private static int explain(Exception failure, PrintWriter err) {
        if (failure instanceof DeskException) {
            err.println("countwright: " + failure.getMessage());
        } else {
            err.println("countwright: this is a fault of the program itself. Please report what follows.");
            failure.printStackTrace(err);
        }
        return COULD_NOT_RUN;
    }
}
