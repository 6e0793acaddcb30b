package countwright.kernel.cli;

import countwright.kernel.cell.JShellEngine;
import countwright.kernel.desk.DeskException;
import countwright.kernel.service.KernelServer;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.worker.WorkerSettings;
import java.io.IOException;
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
    public Integer call() throws InterruptedException {
        ConnectionFile connection;
        try {
            connection = ConnectionFile.read(connectionFile);
        } catch (IOException e) {
            throw new DeskException("cannot read the connection file " + connectionFile + ": " + e.getMessage());
        }
        // A broken installation is told at once; the worker itself starts behind the first answers.
        WorkerSettings settings = WorkerSettings.ofInstallation();
        KernelServer server = KernelServer.start(connection, () -> JShellEngine.start(settings));
        var unused = server.awaitShutdown();
        return 0;
    }
}
