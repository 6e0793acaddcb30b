package countwright.kernel.cli;

import countwright.kernel.desk.DeskException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Locale;
import java.util.Map;

/** The folders in which front ends look for kernelspecs. Source: the Jupyter documentation on its data folders. */
final class KernelSpecHome {

    private final Map<String, String> environment;
    private final String system;
    private final Path userHome;

    /** The places for one user on one system. */
    KernelSpecHome(Map<String, String> environment, String system, Path userHome) {
        this.environment = Map.copyOf(environment);
        this.system = system.toLowerCase(Locale.ROOT);
        this.userHome = userHome;
    }

    static KernelSpecHome ofThisUser() {
        return of(System.getenv(), System.getProperty("os.name", ""), System.getProperty("user.home", ""));
    }

    /** Front ends take the home folder from HOME, where Java asks the system's list of users; they must look in one place. */
    static KernelSpecHome of(Map<String, String> environment, String system, String javasHome) {
        String home = environment.getOrDefault("HOME", "");
        boolean windows = system.toLowerCase(Locale.ROOT).startsWith("windows");
        return new KernelSpecHome(environment, system, Path.of(windows || home.isEmpty() ? javasHome : home));
    }

    /** Returns the user's own folder of kernelspecs. */
    Path perUser() {
        return dataFolder().resolve("kernels");
    }

    /**
     * Returns the folder of kernelspecs of an installation.
     *
     * @throws DeskException if the prefix is no folder
     */
    static Path underPrefix(Path prefix) {
        if (!Files.isDirectory(prefix)) {
            throw new DeskException("the prefix " + prefix + " is not a folder. Name the folder that front ends are "
                    + "installed in, such as a virtual environment, or make it first.");
        }
        return prefix.resolve("share").resolve("jupyter").resolve("kernels");
    }

    private Path dataFolder() {
        String chosen = environment.getOrDefault("JUPYTER_DATA_DIR", "");
        if (!chosen.isEmpty()) {
            return Path.of(chosen);
        }
        if (system.startsWith("mac")) {
            return userHome.resolve("Library").resolve("Jupyter");
        }
        if (system.startsWith("windows")) {
            String roaming = environment.getOrDefault("APPDATA", "");
            return (roaming.isEmpty() ? userHome.resolve("AppData").resolve("Roaming") : Path.of(roaming))
                    .resolve("jupyter");
        }
        String shared = environment.getOrDefault("XDG_DATA_HOME", "");
        return (shared.isEmpty() ? userHome.resolve(".local").resolve("share") : Path.of(shared)).resolve("jupyter");
    }
}
