package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.concurrent.atomic.AtomicBoolean;

/** The seconds that faults took, each held against its limit, and listed in a file and on the terminal at the end. */
final class FaultTimes {

    private static final Path FILE = Path.of("target", "fault-times.txt");
    private static final AtomicBoolean BEGUN = new AtomicBoolean();

    /** A try that something else on the machine has disturbed is repeated so often. */
    private static final int TRIES = 3;

    private final List<String> lines = new ArrayList<>();

    /** Measures something; each call does all of it anew. */
    @FunctionalInterface
    interface Measurement {
        double seconds() throws Exception;
    }

    FaultTimes(String title) {
        lines.add(title);
    }

    /** Fails if it takes too long; the best of a few tries counts, and all are listed. */
    void within(double limitSeconds, String what, Measurement measurement) throws Exception {
        StringBuilder tries = new StringBuilder();
        double best = Double.POSITIVE_INFINITY;
        for (int i = 0; i < TRIES && best >= limitSeconds; i++) {
            double seconds = measurement.seconds();
            best = Math.min(best, seconds);
            tries.append(String.format(Locale.ROOT, " %6.2f s", seconds));
        }
        lines.add(String.format(Locale.ROOT, "  %-64s%s   (limit %.1f s)", what, tries, limitSeconds));
        assertThat(best).as("seconds for: " + what + ";" + tries).isLessThan(limitSeconds);
    }

    void report() throws IOException {
        String table = String.join("\n", lines) + "\n";
        Files.createDirectories(FILE.toAbsolutePath().getParent());
        if (BEGUN.compareAndSet(false, true)) {
            Files.deleteIfExists(FILE);
        }
        Files.writeString(FILE, table, StandardOpenOption.CREATE, StandardOpenOption.APPEND);
        System.out.println(table);
    }

    static double secondsBetween(long startNanos, long endNanos) {
        return (endNanos - startNanos) / 1e9;
    }
}
