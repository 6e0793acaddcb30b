package countwright.kernel.service;

import java.nio.file.Path;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/** Where the history of the user's cells is kept from one kernel to the next. */
public final class HistoryPlace {

    /** The environment variable that names another file, or says {@code off}. */
    public static final String VARIABLE = "COUNTWRIGHT_HISTORY";

    private static final String OFF = "off";

    private HistoryPlace() {}

    /** Returns the file of this user on this machine; empty if the user wants none. */
    public static Optional<Path> ofThisUser() {
        String system = System.getProperty("os.name", "");
        // Java asks the system's list of users for the home folder, where all else on the machine takes it from HOME.
        Optional<Path> home = system.toLowerCase(Locale.ROOT).startsWith("windows")
                ? Optional.empty()
                : folder(System.getenv(), "HOME");
        return of(System.getenv(), system, home.orElseGet(() -> Path.of(System.getProperty("user.home", ""))));
    }

    /** The data folder is where each kind of system expects it; on Linux where the XDG base directories say. */
    static Optional<Path> of(Map<String, String> environment, String system, Path home) {
        String given = environment.getOrDefault(VARIABLE, "").strip();
        if (!given.isEmpty()) {
            return given.toLowerCase(Locale.ROOT).equals(OFF)
                    ? Optional.empty()
                    : Optional.of(Path.of(given).toAbsolutePath());
        }
        String name = system.toLowerCase(Locale.ROOT);
        Path data;
        if (name.startsWith("mac")) {
            data = home.resolve("Library").resolve("Application Support");
        } else if (name.startsWith("windows")) {
            data = folder(environment, "APPDATA").orElse(home.resolve("AppData").resolve("Roaming"));
        } else {
            data = folder(environment, "XDG_DATA_HOME")
                    .orElse(home.resolve(".local").resolve("share"));
        }
        return Optional.of(data.resolve("countwright").resolve("history.jsonl"));
    }

    private static Optional<Path> folder(Map<String, String> environment, String variable) {
        return Optional.ofNullable(environment.get(variable))
                .filter(value -> !value.isBlank())
                .map(Path::of)
                .filter(Path::isAbsolute);
    }
}
