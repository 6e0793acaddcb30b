package countwright.demo;

import countwright.kernel.desk.RunProgress;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;

/** Where the build has put what the tests run. */
final class Demo {

    private Demo() {}

    /** Returns the folder of the finished distribution. */
    static Path distribution() {
        return folder("countwright.distribution");
    }

    /** Returns the folder of the demo notebooks. */
    static Path notebooks() {
        return folder("countwright.notebooks");
    }

    /** Returns the folder of published data and reference values. */
    static Path published() {
        return folder("countwright.published");
    }

    private static Path folder(String property) {
        String folder = System.getProperty(property);
        if (folder == null) {
            throw new IllegalStateException(
                    "the system property " + property + " is not set; run these tests by 'mvn verify', which sets it.");
        }
        return Path.of(folder).normalize();
    }

    /** Hears how a run goes and keeps what failed. */
    static final class Failures implements RunProgress {

        private final List<String> lines = new ArrayList<>();

        List<String> lines() {
            return List.copyOf(lines);
        }

        @Override
        public void started(int number, int total, String label) {}

        @Override
        public void finished(Duration duration) {}

        @Override
        public void failed(Duration duration, List<String> errorLines) {
            lines.addAll(errorLines);
        }
    }
}
