package countwright.kernel.wire;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.DataInputStream;
import java.io.IOException;
import java.net.InetAddress;
import java.net.Socket;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import tools.jackson.databind.node.JsonNodeFactory;

/** Peers that behave as no library would; they speak the bytes of the protocol themselves. */
@Timeout(60)
@SuppressWarnings("NullAway.Init")
class PeerLoopTest {

    private final ConnectionFile connection = ConnectionFile.create("countwright");
    private final MessageCodec codec = new MessageCodec(connection.key(), WireLimits.STANDARD);
    private final BlockingQueue<String> atKernel = new LinkedBlockingQueue<>();
    private KernelSockets kernel;

    @BeforeEach
    void bind() {
        kernel = KernelSockets.bind(connection, WireLimits.STANDARD);
    }

    @AfterEach
    void close() {
        kernel.close();
    }

    @Test
    void heartbeat_peerThatOnlySends_doesNotSilenceItForOthers() throws Exception {
        try (Socket flood = peer(Channel.HEARTBEAT, "REQ");
                Socket other = peer(Channel.HEARTBEAT, "REQ")) {
            Thread sender = new Thread(() -> sendWhileOpen(flood, new byte[64 << 10]));
            sender.setDaemon(true);
            sender.start();
            DataInputStream answers = skipHandshake(other);
            for (int i = 0; i < 20; i++) {
                Thread.sleep(50);
                long start = System.nanoTime();
                other.getOutputStream().write(new byte[] {0, 1, (byte) i});
                assertThat(answers.readNBytes(3)).isEqualTo(new byte[] {0, 1, (byte) i});
                assertThat(TimeUnit.NANOSECONDS.toMillis(System.nanoTime() - start))
                        .as("milliseconds of beat %d", i)
                        .isLessThan(2000);
            }
        }
    }

    @Test
    void requests_ofAPeerThatClosesAfterwards_allArrive() throws Exception {
        kernel.start((channel, envelope) -> {
            atKernel.add(envelope.message().type());
            kernel.send(channel, envelope);
        });
        int count = 2000;
        try (Socket shell = peer(Channel.SHELL, "DEALER")) {
            for (int i = 0; i < count; i++) {
                Message message =
                        Message.first(Header.create("request-" + i, "s", "u"), JsonNodeFactory.instance.objectNode());
                for (byte[] piece : Zmtp.message(codec.encode(new Envelope(Route.none(), message)))) {
                    shell.getOutputStream().write(piece);
                }
            }
        }
        for (int i = 0; i < count; i++) {
            assertThat(atKernel.poll(10, TimeUnit.SECONDS)).isEqualTo("request-" + i);
        }
    }

    @Test
    void iopub_messageOfManyMegabytes_reachesItsReader() throws Exception {
        try (Socket reader = peer(Channel.IOPUB, "SUB")) {
            reader.getOutputStream().write(new byte[] {0, 1, 1});
            DataInputStream in = skipHandshake(reader);
            byte[] welcome = in.readNBytes(2);
            assertThat(welcome).hasSize(2);
            Message large = Message.first(
                    Header.create("stream", "s", "u"),
                    JsonNodeFactory.instance.objectNode().put("text", "x".repeat(70 << 20)));
            kernel.sendWhenRoom(Channel.IOPUB, new Envelope(Route.topic("t"), large));
            in.skipNBytes(70 << 20);
        }
    }

    private static void sendWhileOpen(Socket socket, byte[] emptyMessages) {
        try {
            while (!socket.isClosed()) {
                socket.getOutputStream().write(emptyMessages);
            }
        } catch (IOException e) {
            // The kernel has let it go, or the test is over.
        }
    }

    /** Connects and introduces itself. */
    private Socket peer(Channel channel, String type) throws IOException {
        Socket socket = new Socket(InetAddress.getLoopbackAddress(), connection.port(channel));
        socket.setSoTimeout(10_000);
        socket.getOutputStream().write(Zmtp.greeting());
        socket.getOutputStream().write(Zmtp.ready(type));
        return socket;
    }

    private static DataInputStream skipHandshake(Socket socket) throws IOException {
        DataInputStream in = new DataInputStream(socket.getInputStream());
        in.skipNBytes(Zmtp.GREETING_BYTES + 1);
        in.skipNBytes(in.readUnsignedByte());
        return in;
    }
}
