package countwright.kernel.desk;

import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;

/** The command that starts a kernel, the same for the kernelspec and for a headless run. */
public final class KernelCommand {

    /** System property with the folder of the installed distribution; the launcher sets it. */
    public static final String HOME_PROPERTY = "countwright.home";

    /** What stands for the connection file in a kernelspec. */
    public static final String CONNECTION_FILE = "{connection_file}";

    private static final String WORKER_PATH_PROPERTY = "countwright.worker.path";
    private static final String MAIN_CLASS = "countwright.kernel.cli.Main";

    private final List<String> template;

    private KernelCommand(List<String> template) {
        this.template = List.copyOf(template);
    }

    /**
     * Returns the command of a distribution. Where there is a POSIX shell it is the launcher, which looks for Java anew at
     * each start; on Windows it names the Java that runs now.
     *
     * @throws DeskException if the folder holds no distribution
     */
    public static KernelCommand installedIn(Path home) {
        Path launcher = home.toAbsolutePath().normalize().resolve("bin").resolve("countwright");
        if (!Files.isRegularFile(launcher)) {
            throw new DeskException("there is no launcher " + launcher
                    + ". Build the distribution again, or start it by its own bin/countwright.");
        }
        if (!System.getProperty("os.name", "").toLowerCase(Locale.ROOT).startsWith("windows")) {
            return new KernelCommand(List.of(launcher.toString(), "connect", CONNECTION_FILE));
        }
        return ofRunningJava(Optional.of(home));
    }

    /** Returns the command that starts a kernel with the Java and the class path of this process. */
    public static KernelCommand ofRunningJava() {
        return ofRunningJava(installedHome());
    }

    /** Returns the command of the distribution this process was started from, or else of this process's class path. */
    public static KernelCommand current() {
        return installedHome().map(KernelCommand::installedIn).orElseGet(KernelCommand::ofRunningJava);
    }

    /** Returns the folder of the distribution this process was started from, if it was started by its launcher. */
    public static Optional<Path> installedHome() {
        return Optional.ofNullable(System.getProperty(HOME_PROPERTY)).map(Path::of);
    }

    /** Returns this command, which must begin with a java command, with one more JVM option. */
    KernelCommand withJvmOption(String option) {
        List<String> words = new ArrayList<>(template);
        words.add(1, option);
        return new KernelCommand(words);
    }

    /** Returns a command of these words. */
    static KernelCommand of(List<String> template) {
        return new KernelCommand(template);
    }

    private static KernelCommand ofRunningJava(Optional<Path> home) {
        List<String> command = new ArrayList<>();
        command.add(Path.of(System.getProperty("java.home"), "bin", "java").toString());
        // As the launcher does; the second for the cell engine, which keeps JShell quick in long sessions.
        command.add("-XX:+UseSerialGC");
        command.add("--add-opens=jdk.jshell/jdk.jshell=ALL-UNNAMED");
        home.ifPresent(folder -> command.add("-D" + HOME_PROPERTY + "=" + folder.toAbsolutePath()));
        Optional.ofNullable(System.getProperty(WORKER_PATH_PROPERTY))
                .ifPresent(path -> command.add("-D" + WORKER_PATH_PROPERTY + "=" + path));
        command.add("-cp");
        command.add(System.getProperty("java.class.path"));
        command.add(MAIN_CLASS);
        command.add("connect");
        command.add(CONNECTION_FILE);
        return new KernelCommand(command);
    }

    /** Returns the words of the command, one of them {@link #CONNECTION_FILE}. */
    public List<String> template() {
        return template;
    }

    /** Returns the words of the command with a connection file put in. */
    public List<String> with(Path connectionFile) {
        return template.stream()
                .map(word -> word.equals(CONNECTION_FILE) ? connectionFile.toString() : word)
                .toList();
    }

    @Override
    public String toString() {
        return String.join(" ", template);
    }
}
