package countwright.kernel.desk;

import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.worker.ClassArchives;
import countwright.kernel.worker.WorkerSettings;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.time.Duration;
import java.util.Comparator;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import java.util.stream.Stream;

/**
 * Makes the class-data archives: runs a kernel through what most sessions do, then has both JVMs write down the classes they
 * have loaded when they end.
 */
public final class ArchiveMaking {

    private static final Duration START_LIMIT = Duration.ofMinutes(2);
    private static final Duration DUMP_LIMIT = Duration.ofMinutes(2);

    /** What most sessions load: the compiler's ways, a table, a model, its tables and a chart, an error. */
    private static final List<String> CELLS = List.of(
            "1 + 1",
            "int[] counts = {3, 1, 4};\nfor (int count : counts) {\n    System.out.println(count);\n}",
            "double twice(double x) {\n    return 2 * x;\n}",
            "record Pair(String name, double value) {}\nList.of(new Pair(\"a\", twice(1)), new Pair(\"b\", twice(2)))",
            "Table log = Table.of(numbers(\"faults\", 2, 3, 6, 7, 8, 9), numbers(\"km\", 1, 1, 1, 2, 2, 2), "
                    + "numbers(\"age\", 1, 2, 3, 1, 2, 3), texts(\"depot\", \"A\", \"A\", \"A\", \"B\", \"B\", \"B\"));\nlog",
            "var model = CountModel.of(\"faults\").exposure(\"km\").on(linear(\"age\"), levels(\"depot\")).fit(log);\nmodel",
            "show(Charts.rateRatios(model));",
            "misspelt + 1");

    private final ClassArchives archives;

    /** Prepares to make archives in their place. */
    public ArchiveMaking(ClassArchives archives) {
        this.archives = archives;
    }

    /**
     * Makes both, replacing earlier ones; takes some ten to thirty seconds.
     *
     * @throws DeskException if one cannot be made; the kernel works without, only slower
     */
    public void make() {
        try {
            Path scratch = Files.createTempDirectory("countwright-archives");
            try {
                make(scratch);
            } finally {
                remove(scratch);
            }
        } catch (IOException e) {
            throw new DeskException("the class-data archives could not be made in " + archives.folder() + ": " + e, e);
        }
    }

    /** Removes the archives, if there are any. */
    public void remove() {
        try {
            Files.deleteIfExists(archives.ofKernel());
            Files.deleteIfExists(archives.ofWorker());
            Files.deleteIfExists(archives.folder());
        } catch (IOException e) {
            throw new DeskException(
                    "the class-data archives in " + archives.folder() + " could not be removed: " + e, e);
        }
    }

    private void make(Path scratch) throws IOException {
        ConnectionFile connection = ConnectionFile.create("countwright");
        Path file = scratch.resolve("connection.json");
        connection.write(file);
        Path ofKernel = scratch.resolve("kernel.jsa");
        Path ofWorker = scratch.resolve("worker.jsa");
        KernelCommand recording = KernelCommand.ofRunningJava().withJvmOption(ClassArchives.RECORD + ofKernel);
        Map<String, String> environment =
                Map.of(WorkerSettings.OPTIONS_VARIABLE, ClassArchives.RECORD + ofWorker + " -Xlog:disable");
        try (KernelProcess kernel = KernelProcess.start(recording, file, scratch, environment)) {
            List<ProcessHandle> workers;
            try (KernelClient client = new KernelClient(connection, kernel)) {
                var unused = client.ready(START_LIMIT);
                for (String cell : CELLS) {
                    client.execute(cell);
                }
                workers = kernel.children().toList();
                client.shutDown(DUMP_LIMIT);
            }
            for (ProcessHandle worker : workers) {
                worker.onExit().get(DUMP_LIMIT.toSeconds(), TimeUnit.SECONDS);
            }
            if (!Files.isRegularFile(ofKernel) || !Files.isRegularFile(ofWorker)) {
                throw new IOException("the JVM wrote no archive. " + kernel.lastWords());
            }
        } catch (KernelLostException | ExecutionException | TimeoutException e) {
            throw new IOException("the kernel did not end as it should: " + e.getMessage(), e);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new IOException("interrupted", e);
        }
        Files.createDirectories(archives.folder());
        put(ofKernel, archives.ofKernel());
        put(ofWorker, archives.ofWorker());
    }

    /** Written elsewhere and moved, so that a kernel that starts meanwhile never sees half an archive. */
    private static void put(Path written, Path place) throws IOException {
        Path near = place.resolveSibling(place.getFileName() + ".new");
        Files.copy(written, near, StandardCopyOption.REPLACE_EXISTING);
        Files.move(near, place, StandardCopyOption.ATOMIC_MOVE, StandardCopyOption.REPLACE_EXISTING);
    }

    private static void remove(Path folder) throws IOException {
        try (Stream<Path> tree = Files.walk(folder)) {
            for (Path path : tree.sorted(Comparator.reverseOrder()).toList()) {
                Files.deleteIfExists(path);
            }
        }
    }
}
