package countwright.kernel.cli;

import countwright.kernel.desk.DeskException;
import java.nio.file.Path;
import java.util.concurrent.Callable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Parameters;

/** Runs the kernel itself; front ends call this through the kernelspec. */
@Command(
        name = "connect",
        description = "Run the kernel for a front end. Front ends call this themselves, after 'register'.",
        mixinStandardHelpOptions = true)
final class ConnectCommand implements Callable<Integer> {

    @Parameters(
            paramLabel = "CONNECTION_FILE",
            description = "The file in which the front end says where to listen and how to sign.")
    private Path connectionFile = Path.of("");

    @Override
    public Integer call() {
        return serve(connectionFile);
    }

    /** Serves one front end until it asks for shutdown. This is the one place where kernel and command line meet. */
    private static int serve(Path connectionFile) {
        throw new DeskException("the kernel is not part of this build, so " + connectionFile + " was not served.");
    }
}
