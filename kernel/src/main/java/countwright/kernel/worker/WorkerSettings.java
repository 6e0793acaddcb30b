package countwright.kernel.worker;

import java.io.File;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.stream.Collectors;
import java.util.stream.Stream;

/**
 * What a worker is started with.
 *
 * @param classPath what user code sees: the library, and nothing of the kernel
 * @param jvmOptions further options of its JVM, such as {@code -Xmx4g}
 * @param environment variables set in addition to the kernel's own
 */
public record WorkerSettings(List<Path> classPath, List<String> jvmOptions, Map<String, String> environment) {

    /** The system property that names the installed product's folder. */
    public static final String HOME_PROPERTY = "countwright.home";

    /** The system property that gives the class path itself, for running without an installation. */
    public static final String CLASS_PATH_PROPERTY = "countwright.worker.path";

    /** The environment variable with further JVM options, separated by blanks. */
    public static final String OPTIONS_VARIABLE = "COUNTWRIGHT_WORKER_OPTIONS";

    private static final String FONTS_VARIABLE = "FONTCONFIG_FILE";

    public WorkerSettings {
        classPath = List.copyOf(classPath);
        jvmOptions = List.copyOf(jvmOptions);
        environment = Map.copyOf(environment);
    }

    /**
     * Returns the settings of this installation.
     *
     * @throws IllegalStateException if the worker's archives cannot be found, saying where they were looked for
     */
    public static WorkerSettings ofInstallation() {
        String options = System.getenv().getOrDefault(OPTIONS_VARIABLE, "").strip();
        List<Path> classPath = installedClassPath();
        List<String> jvmOptions = new ArrayList<>();
        ClassArchives.ofInstallation().ifPresent(archives -> jvmOptions.addAll(archives.workerOptions(classPath)));
        if (!options.isEmpty()) {
            jvmOptions.addAll(Arrays.asList(options.split("\\s+", -1)));
        }
        return new WorkerSettings(classPath, jvmOptions, fonts(System.getenv()));
    }

    /** Returns these settings with one more JVM option. */
    public WorkerSettings withJvmOption(String option) {
        List<String> more = new ArrayList<>(jvmOptions);
        more.add(option);
        return new WorkerSettings(classPath, more, environment);
    }

    /** Tells whether the worker is to write down its classes, which no JVM does that has a debugger. */
    public boolean recordsClasses() {
        return jvmOptions.stream().anyMatch(option -> option.startsWith(ClassArchives.RECORD));
    }

    /** Returns the class path in the form the java command takes. */
    public String classPathText() {
        return classPath.stream().map(Path::toString).collect(Collectors.joining(File.pathSeparator));
    }

    /** Names our own font where the user has not named others: without any font, Java on Linux draws no chart. */
    static Map<String, String> fonts(Map<String, String> environment) {
        String home = System.getProperty(HOME_PROPERTY, "");
        Path file = Path.of(home, "share", "fonts", "fonts.conf");
        boolean ours = !home.isEmpty() && !environment.containsKey(FONTS_VARIABLE) && Files.isRegularFile(file);
        return ours ? Map.of(FONTS_VARIABLE, file.toAbsolutePath().toString()) : Map.of();
    }

    private static List<Path> installedClassPath() {
        String given = System.getProperty(CLASS_PATH_PROPERTY, "");
        if (!given.isEmpty()) {
            return Arrays.stream(given.split(File.pathSeparator, -1))
                    .map(Path::of)
                    .toList();
        }
        String home = System.getProperty(HOME_PROPERTY, "");
        if (home.isEmpty()) {
            throw new IllegalStateException("neither " + HOME_PROPERTY + " nor " + CLASS_PATH_PROPERTY
                    + " is set, so the worker's archives cannot be found. Start the kernel with bin/countwright.");
        }
        Path folder = Path.of(home, "lib", "worker");
        try (Stream<Path> files = Files.list(folder)) {
            List<Path> archives = files.filter(file -> file.toString().endsWith(".jar"))
                    .sorted()
                    .toList();
            if (archives.isEmpty()) {
                throw new IllegalStateException("no archives in " + folder + ". Build or install Countwright again.");
            }
            return archives;
        } catch (IOException e) {
            throw new UncheckedIOException("cannot read " + folder + ". Build or install Countwright again.", e);
        }
    }
}
