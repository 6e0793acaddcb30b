package countwright.kernel.wire;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.attribute.PosixFilePermissions;
import java.util.HashSet;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class ConnectionFileTest {

    private static final String VALID = "{\"shell_port\":1001,\"iopub_port\":1002,\"stdin_port\":1003,"
            + "\"control_port\":1004,\"hb_port\":1005,\"ip\":\"127.0.0.1\",\"key\":\"k\",\"transport\":\"tcp\","
            + "\"signature_scheme\":\"hmac-sha256\",\"kernel_name\":\"countwright\",\"extra\":[1]}";

    @TempDir
    @SuppressWarnings("NullAway.Init")
    private Path folder;

    @Test
    void created_writtenAndRead_isTheSameAndPrivate() throws IOException {
        Path file = folder.resolve("kernel.json");
        ConnectionFile created = ConnectionFile.create("countwright");
        created.write(file);

        assertThat(ConnectionFile.read(file)).isEqualTo(created);
        assertThat(PosixFilePermissions.toString(Files.getPosixFilePermissions(file)))
                .isEqualTo("rw-------");
        assertThat(created.key())
                .hasSize(64)
                .isNotEqualTo(ConnectionFile.create("countwright").key());
        assertThat(new HashSet<>(created.ports().values())).hasSize(5);
        assertThat(created.toString()).doesNotContain(created.key());
        assertThatThrownBy(() -> created.write(file)).isInstanceOf(FileAlreadyExistsException.class);
    }

    @Test
    void read_fileThatOthersCanRead_warnsWithoutTheKey() throws IOException {
        Path file = folder.resolve("open.json");
        ConnectionFile created = ConnectionFile.create("countwright");
        created.write(file);
        try (LogCapture log = new LogCapture()) {
            ConnectionFile.read(file);
            assertThat(log.lines()).isEmpty();
            Files.setPosixFilePermissions(file, PosixFilePermissions.fromString("rw-r--r--"));
            ConnectionFile.read(file);
            assertThat(log.lines())
                    .singleElement()
                    .asString()
                    .startsWith("WARNING Other users can read or change the connection file " + file)
                    .doesNotContain(created.key());
        }
    }

    @Test
    void parse_validText_readsAllFields() {
        ConnectionFile file = ConnectionFile.parse(VALID, "f.json");
        assertThat(file.address(Channel.HEARTBEAT)).isEqualTo("tcp://127.0.0.1:1005");
        assertThat(file.address(Channel.IOPUB)).isEqualTo("tcp://127.0.0.1:1002");
        assertThat(file.kernelName()).isEqualTo("countwright");
        assertThat(file.key()).isEqualTo("k");
    }

    @Test
    void parse_ipv6_isBracketedInAddresses() {
        ConnectionFile file = ConnectionFile.parse(VALID.replace("127.0.0.1", "::1"), "f.json");
        assertThat(file.address(Channel.SHELL)).isEqualTo("tcp://[::1]:1001");
    }

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            quoteCharacter = '`',
            value = {
                "\"shell_port\":1001, | `` | lacks 'shell_port'",
                "1005 | 0 | 'hb_port' = 0, which is no port from 1 to 65535",
                "1005 | 65536 | 'hb_port' = 65536",
                "1005 | \"x\" | 'hb_port' = \"x\"",
                "\"tcp\" | \"udp\" | transport 'udp', but only 'tcp' and 'ipc' work here",
                "127.0.0.1\",\"key\":\"k\",\"transport\":\"tcp | \",\"key\":\"k\",\"transport\":\"ipc | has no path in 'ip'",
                "hmac-sha256 | hmac-md5 | signature_scheme 'hmac-md5', but only 'hmac-sha256'",
                "\"k\" | 17 | has no text in 'key'",
                "{ | [ | is not JSON",
            })
    void parse_badField_namesFileFieldAndValue(String found, String replacement, String expected) {
        String text = VALID.replace(found, replacement);
        assertThat(text).isNotEqualTo(VALID);
        assertThatThrownBy(() -> ConnectionFile.parse(text, "f.json"))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("f.json")
                .hasMessageContaining(expected);
    }

    @Test
    void read_missingFile_namesItAndWhatToDo() {
        Path file = folder.resolve("none.json");
        assertThatThrownBy(() -> ConnectionFile.read(file))
                .isInstanceOf(IOException.class)
                .hasMessageContaining(file.toString())
                .hasMessageContaining("Pass the file");
    }
}
