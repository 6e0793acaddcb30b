package countwright.kernel.worker;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Optional;

/**
 * Where the class-data archives of this installation lie: classes in the form in which the JVM has them in memory, so that
 * kernel and worker start without reading and checking each class again. They are made at registration for the JDK in use,
 * serve speed only, and may be deleted at any time. One that does not fit the JDK or the jars is ignored by the JVM.
 *
 * @param folder the folder, which need not exist
 */
public record ClassArchives(Path folder) {

    /** The system property by which the launcher names the folder. */
    public static final String FOLDER_PROPERTY = "countwright.archives";

    /** The JVM option, to be followed by a file, that has a JVM write down its classes when it ends. */
    public static final String RECORD = "-XX:ArchiveClassesAtExit=";

    /** Returns the archives of this installation; empty where the launcher named no place for them. */
    public static Optional<ClassArchives> ofInstallation() {
        String folder = System.getProperty(FOLDER_PROPERTY, "");
        return folder.isEmpty() ? Optional.empty() : Optional.of(new ClassArchives(Path.of(folder)));
    }

    /** Returns the file for the kernel's JVM. */
    public Path ofKernel() {
        return folder.resolve("kernel.jsa");
    }

    /** Returns the file for the worker's JVM. */
    public Path ofWorker() {
        return folder.resolve("worker.jsa");
    }

    /** Returns the options of a worker that make use of its archive, if there is one at least as new as what it holds. */
    List<String> workerOptions(List<Path> classPath) {
        if (!Files.isReadable(ofWorker()) || isOutdated(classPath)) {
            return List.of();
        }
        // Should the archive not fit after all, the JVM would say so on standard output, which is the cell's.
        return List.of("-XX:SharedArchiveFile=" + ofWorker(), "-Xlog:disable");
    }

    /** The JVM notices too, but only after it has given up its own archive as well. */
    private boolean isOutdated(List<Path> classPath) {
        try {
            var made = Files.getLastModifiedTime(ofWorker());
            for (Path part : classPath) {
                if (Files.getLastModifiedTime(part).compareTo(made) > 0) {
                    return true;
                }
            }
            return false;
        } catch (IOException gone) {
            return true;
        }
    }
}
