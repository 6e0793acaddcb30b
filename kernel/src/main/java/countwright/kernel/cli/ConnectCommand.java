package countwright.kernel.cli;

import countwright.kernel.cell.JShellEngine;
import countwright.kernel.desk.DeskException;
import countwright.kernel.service.HistoryPlace;
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

    private static final long LAST_MILLIS = 450;

    @Parameters(
            paramLabel = "CONNECTION_FILE",
            description = "The file in which the front end says where to listen and how to sign.")
    private Path connectionFile = Path.of("");

    @Override
    public Integer call() {
        return serve(connectionFile);
    }

    /** Serves until a front end asks for shutdown. This is the one place where the parts of the kernel meet. */
    static int serve(Path connectionFile) {
        KernelServer server;
        try {
            server = KernelServer.start(
                    ConnectionFile.read(connectionFile),
                    HistoryPlace.ofThisUser(),
                    () -> JShellEngine.start(WorkerSettings.ofInstallation()));
        } catch (IOException | IllegalArgumentException | IllegalStateException e) {
            throw new DeskException(String.valueOf(e.getMessage()), e);
        }
        // A front end that ends the kernel by a signal must not leave its worker behind.
        Runtime.getRuntime().addShutdownHook(new Thread(server::close, "countwright-end"));
        endWithFrontEnd(server);
        var unused = server.ending().thenRun(ConnectCommand::endSoon);
        try {
            server.awaitShutdown();
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
        return Main.DONE;
    }

    /**
     * Front ends wait a second before they use force, which would leave the worker behind. The orderly end takes less;
     * whatever holds it up, such as a front end that does not read, is not waited for.
     */
    private static void endSoon() {
        Thread last = new Thread(
                () -> {
                    try {
                        Thread.sleep(LAST_MILLIS);
                    } catch (InterruptedException e) {
                        Thread.currentThread().interrupt();
                    }
                    Runtime.getRuntime().halt(Main.DONE);
                },
                "countwright-last");
        last.setDaemon(true);
        last.start();
    }

    /** A front end that dies without a word must not leave its kernels running; it names itself in the environment. */
    private static void endWithFrontEnd(KernelServer server) {
        String processId = System.getenv().getOrDefault("JPY_PARENT_PID", "");
        if (processId.matches("[1-9][0-9]{0,17}")) {
            var unused = ProcessHandle.of(Long.parseLong(processId))
                    .map(frontEnd -> frontEnd.onExit().thenRun(server::close));
        }
    }
}
