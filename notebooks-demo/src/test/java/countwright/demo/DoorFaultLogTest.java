package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class DoorFaultLogTest {

    private static final Path COMMITTED = Path.of("data", "door-faults.csv");

    @Test
    void csv_statedSeed_isTheCommittedFileByteForByte() throws Exception {
        byte[] generated = DoorFaultLog.csv(DoorFaultLog.SEED).getBytes(StandardCharsets.UTF_8);

        assertThat(generated).isEqualTo(Files.readAllBytes(COMMITTED));
    }

    @Test
    void main_file_writesTheSame(@TempDir Path folder) throws Exception {
        Path file = folder.resolve("faults.csv");

        DoorFaultLog.main(new String[] {file.toString()});

        assertThat(file).hasSameBinaryContentAs(COMMITTED);
    }

    @Test
    void csv_otherSeed_isAnotherLogOfTheSameShape() {
        List<String> lines = DoorFaultLog.csv(7).lines().toList();

        assertThat(lines).hasSize(3 + 40 * 24);
        assertThat(lines.get(1)).contains("seed 7");
        assertThat(lines.get(2)).isEqualTo("month,vehicle,depot,doorType,age,temperature,kilometres,faults");
        assertThat(DoorFaultLog.csv(7)).isNotEqualTo(DoorFaultLog.csv(8));
    }

    @Test
    void csv_header_saysThatTheDataAreInvented() {
        assertThat(DoorFaultLog.csv(DoorFaultLog.SEED)).startsWith("# Invented data");
    }
}
