package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** The cells that the README shows run as they stand, in the folder it names. */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class ReadmeKernelTest {

    private static final Pattern JAVA_BLOCK = Pattern.compile("```java\\n(.*?)```", Pattern.DOTALL);

    @TempDir
    private Path temporary;

    @Test
    void cells_runInOrderWithoutAnError() throws Exception {
        List<String> cells = JAVA_BLOCK
                .matcher(Files.readString(Demo.notebooks().resolveSibling("README.md")))
                .results()
                .map(block -> block.group(1))
                .toList();
        assertThat(cells).as("cells of the README").hasSizeGreaterThanOrEqualTo(4);

        try (LiveKernel kernel = LiveKernel.start(Demo.notebooks(), temporary, Map.of())) {
            for (String cell : cells) {
                assertThat(kernel.run(cell).error()).as(cell).isEmpty();
            }
            assertThat(kernel.run("model").value()).contains("rate ratio", "How well it holds");
        }
    }
}
