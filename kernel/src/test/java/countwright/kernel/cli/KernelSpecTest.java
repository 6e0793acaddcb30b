package countwright.kernel.cli;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import countwright.kernel.desk.DeskException;
import countwright.kernel.desk.KernelCommand;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;

class KernelSpecTest {

    @TempDir
    private Path temporary;

    private Path kernels = Path.of("");
    private KernelCommand command = KernelCommand.ofRunningJava();

    @BeforeEach
    void makeDistribution() throws IOException {
        kernels = temporary.resolve("share/jupyter/kernels");
        Path bin = Files.createDirectories(temporary.resolve("count wright/bin"));
        Files.writeString(bin.resolve("countwright"), "launcher");
        command = KernelCommand.installedIn(temporary.resolve("count wright"));
    }

    @Nested
    class Write {

        @Test
        void fresh_hasCommandNameAndLogos() throws IOException {
            KernelSpec.below(kernels).write(command);

            JsonNode spec = JsonMapper.shared().readTree(Files.readString(kernels.resolve("countwright/kernel.json")));
            assertThat(spec.path("argv").path(0).stringValue())
                    .isEqualTo(temporary.resolve("count wright/bin/countwright").toString());
            assertThat(spec.path("argv").path(1).stringValue()).isEqualTo("connect");
            assertThat(spec.path("argv").path(2).stringValue()).isEqualTo("{connection_file}");
            assertThat(spec.path("display_name").stringValue()).isEqualTo("Countwright (Java)");
            assertThat(spec.path("language").stringValue()).isEqualTo("java");
            assertThat(spec.path("interrupt_mode").stringValue()).isEqualTo("message");
            assertThat(spec.path("metadata").path("debugger").booleanValue()).isFalse();
            assertThat(kernels.resolve("countwright")).isDirectoryContaining("glob:**/logo-32x32.png");
            assertThat(kernels.resolve("countwright/logo-svg.svg")).content().startsWith("<svg ");
        }

        @Test
        void second_replacesTheFirstWhole() throws IOException {
            KernelSpec spec = KernelSpec.below(kernels);
            spec.write(command);
            Files.writeString(spec.folder().resolve("kernel.js"), "stale");

            spec.write(command);

            assertThat(kernels).isDirectoryContaining("glob:**/countwright");
            try (var children = Files.list(kernels)) {
                assertThat(children).as("no leftovers").hasSize(1);
            }
            assertThat(spec.folder().resolve("kernel.js")).doesNotExist();
            assertThat(spec.folder().resolve("kernel.json")).exists();
        }

        @Test
        void foreignFolder_isLeftAlone() throws IOException {
            Path foreign = Files.createDirectories(kernels.resolve("countwright"));
            Files.writeString(foreign.resolve("kernel.json"), "{\"display_name\": \"other\"}");

            assertThatThrownBy(() -> KernelSpec.below(kernels).write(command))
                    .isInstanceOf(DeskException.class)
                    .hasMessageContaining(foreign.toString())
                    .hasMessageContaining("move it away");
            assertThat(foreign.resolve("kernel.json")).hasContent("{\"display_name\": \"other\"}");
        }

        @Test
        void aFileInTheWay_isNamed() throws IOException {
            Files.writeString(temporary.resolve("share"), "a file");

            assertThatThrownBy(() -> KernelSpec.below(kernels).write(command))
                    .isInstanceOf(DeskException.class)
                    .hasMessageContaining(temporary.resolve("share").toString());
        }
    }

    @Nested
    class Remove {

        @Test
        void ours_goesAndItsNeighboursStay() throws IOException {
            Path neighbour = Files.createDirectories(kernels.resolve("other"));
            KernelSpec spec = KernelSpec.below(kernels);
            spec.write(command);

            spec.remove();

            assertThat(spec.folder()).doesNotExist();
            assertThat(neighbour).exists();
        }

        @Test
        void foreign_stays() throws IOException {
            Path foreign = Files.createDirectories(kernels.resolve("countwright"));

            assertThatThrownBy(() -> KernelSpec.below(kernels).remove()).hasMessageContaining("is not removed");
            assertThat(foreign).exists();
        }
    }

    @Nested
    class Place {

        private final Path user = Path.of("/users/me");

        @Test
        void linux_isBelowTheDataHome() {
            assertThat(place(Map.of(), "Linux")).isEqualTo(Path.of("/users/me/.local/share/jupyter/kernels"));
            assertThat(place(Map.of("XDG_DATA_HOME", "/data"), "Linux")).isEqualTo(Path.of("/data/jupyter/kernels"));
        }

        @Test
        void mac_isTheLibrary() {
            assertThat(place(Map.of("XDG_DATA_HOME", "/data"), "Mac OS X"))
                    .isEqualTo(Path.of("/users/me/Library/Jupyter/kernels"));
        }

        @Test
        void windows_isTheRoamingFolder() {
            assertThat(place(Map.of("APPDATA", "/roaming"), "Windows 11"))
                    .isEqualTo(Path.of("/roaming/jupyter/kernels"));
        }

        @Test
        void dataDirVariable_winsEverywhere() {
            Map<String, String> environment = Map.of("JUPYTER_DATA_DIR", "/chosen", "XDG_DATA_HOME", "/data");
            assertThat(place(environment, "Linux")).isEqualTo(Path.of("/chosen/kernels"));
            assertThat(place(environment, "Mac OS X")).isEqualTo(Path.of("/chosen/kernels"));
        }

        @Test
        void place_homeOfTheEnvironment_isWhereFrontEndsLook() {
            Map<String, String> environment = Map.of("HOME", "/elsewhere");
            assertThat(KernelSpecHome.of(environment, "Linux", "/home/user").perUser())
                    .isEqualTo(Path.of("/elsewhere/.local/share/jupyter/kernels"));
            assertThat(KernelSpecHome.of(Map.of(), "Linux", "/home/user").perUser())
                    .isEqualTo(Path.of("/home/user/.local/share/jupyter/kernels"));
        }

        private Path place(Map<String, String> environment, String system) {
            return new KernelSpecHome(environment, system, user).perUser();
        }
    }
}
