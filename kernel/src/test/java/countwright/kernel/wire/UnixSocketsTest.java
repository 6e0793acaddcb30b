package countwright.kernel.wire;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.net.StandardProtocolFamily;
import java.net.UnixDomainSocketAddress;
import java.nio.ByteBuffer;
import java.nio.channels.ServerSocketChannel;
import java.nio.channels.SocketChannel;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.attribute.PosixFilePermissions;
import java.util.EnumMap;
import java.util.Map;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

@DisabledOnOs(value = OS.WINDOWS, disabledReason = "front ends use ipc on POSIX systems only")
@Timeout(30)
@SuppressWarnings("NullAway.Init")
class UnixSocketsTest {

    @TempDir
    private Path folder;

    private ConnectionFile connection;

    @BeforeEach
    void connection() {
        Map<Channel, Integer> numbers = new EnumMap<>(Channel.class);
        for (Channel channel : Channel.values()) {
            numbers.put(channel, numbers.size() + 1);
        }
        connection = new ConnectionFile(Transport.IPC, folder.resolve("kernel").toString(), numbers, "k", "");
    }

    @Test
    void bound_eachSocketIsForItsOwnerOnlyAndGoneAtTheEnd() throws Exception {
        try (KernelSockets kernel = KernelSockets.bind(connection, WireLimits.STANDARD)) {
            kernel.start((channel, envelope) -> {});
            for (Channel channel : Channel.values()) {
                Path file = connection.socketFile(channel);
                assertThat(PosixFilePermissions.toString(Files.getPosixFilePermissions(file)))
                        .isEqualTo("rw-------");
                try (SocketChannel peer = SocketChannel.open(StandardProtocolFamily.UNIX)) {
                    peer.connect(UnixDomainSocketAddress.of(file));
                    ByteBuffer greeting = ByteBuffer.allocate(Zmtp.GREETING_BYTES);
                    while (greeting.hasRemaining() && peer.read(greeting) >= 0) {
                        assertThat(greeting.get(0)).isEqualTo((byte) 0xff);
                    }
                    assertThat(greeting.array()).isEqualTo(Zmtp.greeting());
                }
            }
        }
        assertThat(folder).isEmptyDirectory();
    }

    @Test
    void staleSocketFile_isReplaced() throws Exception {
        Path file = connection.socketFile(Channel.SHELL);
        ServerSocketChannel.open(StandardProtocolFamily.UNIX)
                .bind(UnixDomainSocketAddress.of(file))
                .close();
        assertThat(file).exists();

        KernelSockets.bind(connection, WireLimits.STANDARD).close();

        assertThat(folder).isEmptyDirectory();
    }

    @Test
    void socketOfALivingKernel_isLeftAlone() throws Exception {
        try (KernelSockets first = KernelSockets.bind(connection, WireLimits.STANDARD)) {
            assertThatThrownBy(() -> KernelSockets.bind(connection, WireLimits.STANDARD))
                    .isInstanceOf(IllegalStateException.class)
                    .hasMessageContaining(connection.address(Channel.SHELL))
                    .hasMessageContaining("another kernel listens there");
            assertThat(connection.socketFile(Channel.SHELL)).exists();
            assertThat(first.session()).isNotEmpty();
        }
    }

    @Test
    void fileThatIsNoSocket_isLeftAlone() throws IOException {
        Path file = connection.socketFile(Channel.IOPUB);
        Files.writeString(file, "kept");

        assertThatThrownBy(() -> KernelSockets.bind(connection, WireLimits.STANDARD))
                .hasMessageContaining("a file that is no socket is in its place");
        assertThat(file).hasContent("kept");
    }

    @Test
    void folderThatIsNotThere_isNamed() {
        ConnectionFile elsewhere = new ConnectionFile(
                Transport.IPC, folder.resolve("none/kernel").toString(), connection.ports(), "k", "");
        assertThatThrownBy(() -> KernelSockets.bind(elsewhere, WireLimits.STANDARD))
                .hasMessageContaining("none/kernel-")
                .hasMessageContaining("its folder is not there");
    }

    @Test
    void folderOpenToAll_isWarnedOf() throws Exception {
        Files.setPosixFilePermissions(folder, PosixFilePermissions.fromString("rwxrwxrwx"));
        try (LogCapture log = new LogCapture()) {
            KernelSockets.bind(connection, WireLimits.STANDARD).close();
            assertThat(log.lines()).anyMatch(line -> line.startsWith("WARNING Others can write to " + folder));
        }
    }
}
