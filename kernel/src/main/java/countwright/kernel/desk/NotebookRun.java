package countwright.kernel.desk;

import countwright.kernel.wire.ConnectionFile;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.function.Supplier;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * Runs a notebook from top to bottom in a kernel of its own, and writes the executed copy and the report.
 *
 * <p>The kernel is started and spoken to as any front end would: a process, a connection file, five sockets. Its working
 * folder is the notebook's, so that relative names of data files mean the same as in a front end. The first cell that
 * fails stops the run, unless it is tagged {@code raises-exception}; what was done so far is still written. The source
 * notebook is never changed.
 */
public final class NotebookRun {

    private static final Duration START_LIMIT = Duration.ofSeconds(60);
    private static final Duration END_PATIENCE = Duration.ofSeconds(5);

    private final Path source;
    private final Path outputFolder;
    private final String name;
    private final KernelCommand command;
    private final Notebook notebook;

    private NotebookRun(Path source, Path outputFolder, String name, KernelCommand command, Notebook notebook) {
        this.source = source;
        this.outputFolder = outputFolder;
        this.name = name;
        this.command = command;
        this.notebook = notebook;
    }

    /**
     * Prepares a run: reads the notebook and makes the output folder, so that a mistake shows before any cell runs.
     *
     * @param outputFolder where the executed copy and the report go; made if it does not exist
     * @throws DeskException if the notebook cannot be read, or the output would overwrite it or cannot be written
     */
    public static NotebookRun of(Path source, Path outputFolder, KernelCommand command) {
        Notebook notebook = Notebook.read(source);
        Path folder = outputFolder.toAbsolutePath().normalize();
        String file = source.getFileName().toString();
        String name = file.endsWith(".ipynb") ? file.substring(0, file.length() - ".ipynb".length()) : file;
        try {
            Files.createDirectories(folder);
            Path executed = folder.resolve(name + ".ipynb");
            if (Files.exists(executed) && Files.isSameFile(executed, source)) {
                throw new DeskException("the executed copy would overwrite the notebook " + source
                        + ". Choose another folder with --output.");
            }
        } catch (IOException e) {
            throw new DeskException(
                    "the output folder " + folder + " cannot be made: " + e.getMessage()
                            + ". Choose another with --output.",
                    e);
        }
        if (!Files.isWritable(folder)) {
            throw new DeskException("no permission to write into " + folder + ". Choose another folder with --output.");
        }
        return new NotebookRun(source.toAbsolutePath(), folder, name, command, notebook);
    }

    /** Returns the folder that output goes to unless another is chosen: {@code out} beside the notebook. */
    public static Path defaultOutputFolder(Path source) {
        return source.toAbsolutePath().resolveSibling("out");
    }

    /**
     * What a run has left behind.
     *
     * @param executed the executed copy of the notebook
     * @param report the page for a reader
     * @param stoppedAt number of the cell that failed, counted from 1 over the cells that run; empty if none did
     * @param duration how long the run took
     */
    public record Result(Path executed, Path report, Optional<Integer> stoppedAt, Duration duration) {}

    /**
     * Runs the notebook and writes its output.
     *
     * @throws DeskException if the kernel cannot be started or the output cannot be written
     */
    public Result run(RunProgress progress) {
        Instant started = Instant.now();
        long startNanos = System.nanoTime();
        Session session = inKernel(progress);
        Duration duration = Duration.ofNanos(System.nanoTime() - startNanos);
        Notebook executed = notebook.with(metadata(session.kernelInfo()), session.cells());
        RunRecord record = new RunRecord(
                session.kernelInfo().path("implementation_version").asString("of unknown version"),
                session.kernelInfo().path("language_info").path("version").asString("of unknown version"),
                started,
                duration,
                session.stoppedAt());
        Path executedFile = outputFolder.resolve(name + ".ipynb");
        Path report = outputFolder.resolve(name + ".html");
        executed.write(executedFile);
        HtmlReport.of(executed, record, name, source.resolveSibling(".")).write(report);
        return new Result(executedFile, report, session.stoppedAt(), duration);
    }

    private record Session(ObjectNode kernelInfo, List<Cell> cells, Optional<Integer> stoppedAt) {}

    private Session inKernel(RunProgress progress) {
        Path runtime = runtimeFolder();
        Path connectionFile = runtime.resolve("kernel.json");
        try {
            ConnectionFile connection = ConnectionFile.create("countwright");
            connection.write(connectionFile);
            try (KernelProcess kernel = KernelProcess.start(command, connectionFile, source.resolveSibling("."));
                    KernelClient client = new KernelClient(connection, kernel)) {
                ObjectNode info = client.ready(START_LIMIT);
                Session session = cells(client, info, progress);
                client.shutDown(END_PATIENCE);
                return session;
            }
        } catch (IOException | UncheckedIOException e) {
            throw new DeskException("the connection file could not be written: " + e.getMessage(), e);
        } finally {
            remove(connectionFile, runtime);
        }
    }

    private Session cells(KernelClient client, ObjectNode info, RunProgress progress) {
        // Made at the end, because a later cell may renew what an earlier one has shown.
        List<Supplier<Cell>> done = new ArrayList<>();
        Optional<Integer> stoppedAt = Optional.empty();
        int number = 0;
        for (Cell cell : notebook.cells()) {
            if (!(cell instanceof Cell.Code code)) {
                done.add(() -> cell);
            } else if (code.isBlank() || stoppedAt.isPresent()) {
                done.add(code::cleared);
            } else {
                number++;
                progress.started(number, notebook.countOfCodeCells(), CellLabel.of(code.source()));
                long start = System.nanoTime();
                RunLog.CellLog log = run(client, code);
                Duration duration = Duration.ofNanos(System.nanoTime() - start);
                Optional<Output.Failed> failure = log.failure();
                if (failure.isPresent() && !(code.mayFail() && client.isAlive())) {
                    stoppedAt = Optional.of(number);
                    progress.failed(duration, failure.get().lines());
                } else {
                    progress.finished(duration);
                }
                done.add(() -> code.ran(log.executionCount(), log.outputs()));
            }
        }
        return new Session(info, done.stream().map(Supplier::get).toList(), stoppedAt);
    }

    private static RunLog.CellLog run(KernelClient client, Cell.Code code) {
        try {
            return client.execute(code.source());
        } catch (KernelLostException e) {
            e.cell().fail(e.asFailure());
            return e.cell();
        }
    }

    private ObjectNode metadata(ObjectNode kernelInfo) {
        ObjectNode metadata = notebook.metadata().deepCopy();
        ObjectNode spec = JsonNodeFactory.instance.objectNode();
        spec.put("name", "countwright");
        spec.put("display_name", "Countwright (Java)");
        spec.put("language", "java");
        metadata.set("kernelspec", spec);
        JsonNode language = kernelInfo.path("language_info");
        if (language.isObject()) {
            metadata.set("language_info", language);
        }
        return metadata;
    }

    private static Path runtimeFolder() {
        try {
            return Files.createTempDirectory("countwright-run-");
        } catch (IOException e) {
            throw new DeskException(
                    "no temporary folder could be made in " + System.getProperty("java.io.tmpdir") + ": "
                            + e.getMessage(),
                    e);
        }
    }

    private static void remove(Path connectionFile, Path runtime) {
        try {
            Files.deleteIfExists(connectionFile);
            Files.deleteIfExists(runtime);
        } catch (IOException e) {
            // It is a temporary folder readable by its owner only; the system will clear it.
        }
    }
}
