package countwright.install;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assumptions.assumeThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Comparator;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.TimeUnit;
import java.util.stream.Stream;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** Starts the finished distribution from a shell, as a user and as a front end do. */
@Tag("distribution")
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class LauncherDistributionTest {

    private static final Path DISTRIBUTION = Path.of(System.getProperty("countwright.distribution", ""));
    private static final Path JAVA_HOME = Path.of(System.getProperty("java.home"));

    @TempDir
    private Path temporary;

    private record Run(int exitCode, String out, String err) {}

    @Nested
    class Start {

        @Test
        void plain_saysVersion() throws Exception {
            Run run = launch(DISTRIBUTION.resolve("bin/countwright"), Map.of(), "--version");

            assertThat(run.err()).isEmpty();
            assertThat(run.out()).startsWith("Countwright ").contains("Java " + System.getProperty("java.version"));
            assertThat(run.exitCode()).isZero();
        }

        @Test
        void throughSymbolicLinks_findsItself() throws Exception {
            Path copy = copyTo("a folder/count wright");
            Path first = Files.createSymbolicLink(temporary.resolve("absolute link"), copy.resolve("bin/countwright"));
            Path bin = Files.createDirectory(temporary.resolve("some bin"));
            Path second = Files.createSymbolicLink(bin.resolve("cw"), Path.of("../absolute link"));

            for (Path launcher : List.of(copy.resolve("bin/countwright"), first, second)) {
                Run run = launch(launcher, Map.of(), "--version");
                assertThat(run.out()).as(launcher.toString()).startsWith("Countwright ");
            }
        }

        @Test
        void fromThePath_findsItself() throws Exception {
            Path bin = Files.createDirectory(temporary.resolve("my bin"));
            Files.createSymbolicLink(bin.resolve("countwright"), DISTRIBUTION.resolve("bin/countwright"));

            Run run = start(Map.of("PATH", bin + ":/usr/bin:/bin"), List.of("sh", "-c", "countwright --version"));

            assertThat(run.out()).startsWith("Countwright ");
        }

        @Test
        void wrongUsage_isExitCodeTwo() throws Exception {
            assertThat(launch(DISTRIBUTION.resolve("bin/countwright"), Map.of(), "no-such")
                            .exitCode())
                    .isEqualTo(2);
        }
    }

    @Nested
    class JavaMissing {

        @Test
        void javaHomeWithoutJava_isNamed() throws Exception {
            Run run = launchWith(Map.of("JAVA_HOME", "/no/such jdk"));

            assertThat(run.exitCode()).isEqualTo(2);
            assertThat(run.err()).contains("JAVA_HOME is /no/such jdk", "unset it");
        }

        @Test
        void noJavaAtAll_saysHowToGetOne() throws Exception {
            Path tools = tools();

            Run run = launchWith(Map.of("JAVA_HOME", "", "PATH", tools.toString()));

            assertThat(run.exitCode()).isEqualTo(2);
            assertThat(run.err()).contains("no Java was found", "JDK 17 or newer", "apt install", "https://");
        }

        @Test
        void oldJava_isNamedWithItsVersion() throws Exception {
            Path old = fakeJava("JAVA_VERSION=\"1.8.0_402\"\nMODULES=\"\"\n");

            Run run = launchWith(Map.of("JAVA_HOME", old.toString()));

            assertThat(run.exitCode()).isEqualTo(2);
            assertThat(run.err()).contains("Java 1.8.0_402, which is too old", "JDK 17 or newer");
        }

        @Test
        void runtimeWithoutJshell_isNamed() throws Exception {
            Path runtime = fakeJava("JAVA_VERSION=\"21.0.2\"\nMODULES=\"java.base java.desktop\"\n");

            Run run = launchWith(Map.of("JAVA_HOME", runtime.toString()));

            assertThat(run.exitCode()).isEqualTo(2);
            assertThat(run.err()).contains("without the module jdk.jshell", "a JDK, not only a Java runtime");
        }

        private Run launchWith(Map<String, String> environment) throws Exception {
            return launch(DISTRIBUTION.resolve("bin/countwright"), environment, "--version");
        }

        private Path fakeJava(String release) throws IOException {
            Path home = temporary.resolve("fake java");
            Path java = Files.createDirectories(home.resolve("bin")).resolve("java");
            Files.writeString(java, "#!/bin/sh\nexit 9\n");
            assertThat(java.toFile().setExecutable(true)).isTrue();
            Files.writeString(home.resolve("release"), release);
            return home;
        }

        /** A PATH with what the launcher itself needs, and no java. */
        private Path tools() throws IOException {
            Path tools = Files.createDirectory(temporary.resolve("tools"));
            for (String tool : List.of("ls", "sed", "head", "tr", "sh")) {
                Path found = Stream.of("/bin", "/usr/bin")
                        .map(folder -> Path.of(folder, tool))
                        .filter(Files::exists)
                        .findFirst()
                        .orElseThrow();
                Files.createSymbolicLink(tools.resolve(tool), found);
            }
            return tools;
        }
    }

    @Nested
    class Register {

        @Test
        void register_twiceThenUnregister_leavesNothing() throws Exception {
            Path prefix = Files.createDirectory(temporary.resolve("a prefix"));
            Path launcher = copyTo("count wright").resolve("bin/countwright");
            Path spec = prefix.resolve("share/jupyter/kernels/countwright/kernel.json");

            Run first = launch(launcher, Map.of(), "register", "--prefix", prefix.toString());
            Run second = launch(launcher, Map.of(), "register", "--prefix", prefix.toString());
            String json = Files.readString(spec);
            Run third = launch(launcher, Map.of(), "unregister", "--prefix", prefix.toString());

            assertThat(first.out()).startsWith("Registered");
            assertThat(second.out()).startsWith("Replaced");
            assertThat(json).contains("\"" + launcher.toRealPath() + "\"");
            assertThat(third.out()).startsWith("Removed");
            assertThat(spec.getParent()).doesNotExist();
        }

        @Test
        void perUser_goesToTheDataFolder() throws Exception {
            Run run = launch(
                    DISTRIBUTION.resolve("bin/countwright"),
                    Map.of("JUPYTER_DATA_DIR", temporary.resolve("data").toString()),
                    "register");

            assertThat(run.exitCode()).isZero();
            assertThat(temporary.resolve("data/kernels/countwright/kernel.json"))
                    .exists();
        }

        @Test
        void withoutPermission_saysWhereAndWhatToDo() throws Exception {
            Path prefix = Files.createDirectory(temporary.resolve("locked"));
            assumeThat(prefix.toFile().setWritable(false)).isTrue();
            assumeThat(Files.isWritable(prefix))
                    .as("the super-user may write anywhere")
                    .isFalse();

            Run run = launch(
                    DISTRIBUTION.resolve("bin/countwright"), Map.of(), "register", "--prefix", prefix.toString());

            assertThat(run.exitCode()).isEqualTo(2);
            assertThat(run.err()).contains("no permission to write " + prefix, "--prefix");
        }
    }

    @Nested
    class Fonts {

        private static final String CHART = "Charts.rates(Table.of(texts(\"depot\", \"A\", \"B\"), "
                + "numbers(\"n\", 3, 5), numbers(\"km\", 10, 9)), \"n\", \"km\", \"depot\")";
        private static final String VARIABLE = "System.getenv(\"FONTCONFIG_FILE\")";

        @Test
        void systemWithoutFonts_stillDrawsCharts() throws Exception {
            Path home = copyTo("distribution");
            Path config = home.resolve("share/fonts/fonts.conf");
            String emptySystem = Files.readString(config)
                    .replaceAll("<dir>/[^<]*</dir>", "<dir>/no/such/folder</dir>")
                    .replace("/etc/fonts", "/no/such/folder");
            assertThat(emptySystem).contains("<dir>/no/such/folder</dir>").contains("prefix=\"relative\"");
            Files.writeString(config, emptySystem);

            Run run = runCell(home, Map.of("XDG_DATA_HOME", "/no/such/folder"), CHART);

            assertThat(run.exitCode()).as(run.out() + run.err()).isZero();
            assertThat(temporary.resolve("out/cell.ipynb")).content().contains("\"image/png\"");
        }

        @Test
        void fontsOfTheUser_areLeftAlone() throws Exception {
            Run run = runCell(DISTRIBUTION, Map.of("FONTCONFIG_FILE", "/my/own/fonts.conf"), VARIABLE);

            assertThat(run.exitCode()).as(run.out() + run.err()).isZero();
            assertThat(temporary.resolve("out/cell.ipynb")).content().contains("/my/own/fonts.conf");
        }

        private Run runCell(Path home, Map<String, String> environment, String code) throws Exception {
            Path notebook = temporary.resolve("cell.ipynb");
            Files.writeString(notebook, """
                    {"cells": [{"cell_type": "code", "id": "a", "execution_count": null, "metadata": {},
                      "outputs": [], "source": "%s"}], "metadata": {}, "nbformat": 4, "nbformat_minor": 5}
                    """.formatted(code.replace("\"", "\\\"")));
            return launch(home.resolve("bin/countwright"), environment, "run", notebook.toString());
        }
    }

    @Nested
    class Content {

        @Test
        void worker_seesNoLibraryOfTheKernel() throws IOException {
            assertThat(names("lib/worker"))
                    .containsExactlyInAnyOrder(
                            "commons-math3",
                            "countwright-stdlib",
                            "countwright-worker",
                            "duckdb_jdbc",
                            "jspecify",
                            "xchart");
        }

        @Test
        void kernel_hasItsLibrariesAndNotTheWorkers() throws IOException {
            assertThat(names("lib/kernel"))
                    .containsExactlyInAnyOrder(
                            "commonmark",
                            "commonmark-ext-gfm-tables",
                            "countwright-kernel",
                            "jackson-annotations",
                            "jackson-core",
                            "jackson-databind",
                            "java10-shim",
                            "java8-shim",
                            "jeromq",
                            "jnacl",
                            "owasp-java-html-sanitizer",
                            "picocli");
        }

        @Test
        void licence_isThere() {
            assertThat(DISTRIBUTION.resolve("share/LICENSE")).content().contains("Apache License");
        }

        private List<String> names(String folder) throws IOException {
            try (Stream<Path> jars = Files.list(DISTRIBUTION.resolve(folder))) {
                return jars.map(jar -> jar.getFileName().toString().replaceFirst("-[0-9][^/]*\\.jar$", ""))
                        .toList();
            }
        }
    }

    private Path copyTo(String folder) throws IOException {
        Path copy = temporary.resolve(folder);
        try (Stream<Path> tree = Files.walk(DISTRIBUTION)) {
            for (Path source : tree.sorted(Comparator.naturalOrder()).toList()) {
                Path target = copy.resolve(DISTRIBUTION.relativize(source).toString());
                if (Files.isDirectory(source)) {
                    Files.createDirectories(target);
                } else if (source.toString().endsWith(".jar")) {
                    Files.createSymbolicLink(target, source.toAbsolutePath());
                } else {
                    Files.copy(source, target);
                }
            }
        }
        return copy;
    }

    private Run launch(Path launcher, Map<String, String> environment, String... arguments) throws Exception {
        List<String> command = new ArrayList<>(List.of(launcher.toString()));
        command.addAll(Arrays.asList(arguments));
        Map<String, String> variables = new HashMap<>(Map.of("JAVA_HOME", JAVA_HOME.toString()));
        variables.putAll(environment);
        return start(variables, command);
    }

    private Run start(Map<String, String> environment, List<String> command) throws Exception {
        Path out = Files.createTempFile(temporary, "out", ".txt");
        Path err = Files.createTempFile(temporary, "err", ".txt");
        ProcessBuilder builder = new ProcessBuilder(command)
                .directory(temporary.toFile())
                .redirectOutput(out.toFile())
                .redirectError(err.toFile());
        builder.environment().putAll(environment);
        Process process = builder.start();
        if (!process.waitFor(60, TimeUnit.SECONDS)) {
            process.destroyForcibly();
            throw new AssertionError(command + " did not end within a minute");
        }
        return new Run(
                process.exitValue(),
                Files.readString(out, StandardCharsets.UTF_8),
                Files.readString(err, StandardCharsets.UTF_8));
    }
}
