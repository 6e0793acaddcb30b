package countwright.kernel.wire;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.nio.charset.StandardCharsets;
import java.time.Duration;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Collections;
import java.util.List;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.zeromq.SocketType;
import org.zeromq.ZMQ;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

@Timeout(20)
class SocketsTest {

    private static final WireLimits SMALL = new WireLimits(12, 4096, 8192, 20);

    private final ConnectionFile connection = ConnectionFile.create("countwright");
    private final BlockingQueue<Envelope> atKernel = new LinkedBlockingQueue<>();
    private final BlockingQueue<Envelope> atClient = new LinkedBlockingQueue<>();

    @SuppressWarnings("NullAway.Init")
    private KernelSockets kernel;

    @SuppressWarnings("NullAway.Init")
    private ClientSockets client;

    @BeforeEach
    void connect() {
        kernel = KernelSockets.bind(connection, SMALL);
        kernel.start((channel, envelope) -> atKernel.add(envelope));
        client = ClientSockets.connect(connection, "tester", (channel, envelope) -> atClient.add(envelope));
    }

    @AfterEach
    void close() {
        client.close();
        kernel.close();
    }

    @Test
    void shell_requestAndReply_arriveWhole() throws Exception {
        Message request = client.request("kernel_info_request", content("a", "ü😀"));
        client.send(Channel.SHELL, request);

        Envelope received = next(atKernel);
        assertThat(received.message().header()).isEqualTo(request.header());
        assertThat(received.message().content()).isEqualTo(request.content());

        Header header = Header.create("kernel_info_reply", kernel.session(), "kernel");
        kernel.send(
                Channel.SHELL,
                new Envelope(
                        received.route(),
                        Message.caused(header, received.message().header(), content("b", "1"))));
        Message reply = nextOfType(atClient, "kernel_info_reply");
        assertThat(reply.parent()).contains(request.header());
    }

    @Test
    void iopub_subscription_isWelcomedWithItsTopic() throws Exception {
        client.subscribed().get(10, TimeUnit.SECONDS);
        Message welcome = nextOfType(atClient, "iopub_welcome");
        assertThat(welcome.content().path("subscription").stringValue()).isEmpty();
        assertThat(welcome.parent()).isEmpty();
    }

    @Test
    void heartbeat_anyBytes_comeBack() throws Exception {
        client.beat().get(10, TimeUnit.SECONDS);
        // A plain REQ socket, as other front ends use.
        try (ZMQ.Context context = ZMQ.context(1);
                ZMQ.Socket plain = context.socket(SocketType.REQ)) {
            plain.setReceiveTimeOut(10_000);
            shakeHandsOrRetrySoon(plain);
            plain.connect(connection.address(Channel.HEARTBEAT));
            plain.send("ping");
            assertThat(plain.recvStr()).isEqualTo("ping");
        }
    }

    @Test
    void stdin_absentFrontEnd_isReported() throws Exception {
        BlockingQueue<String> reports = new LinkedBlockingQueue<>();
        Message question = Message.first(Header.create("input_request", "s", "u"), content("prompt", "?"));
        kernel.ask(new Envelope(Route.of(List.of(new byte[] {1, 2, 3})), question), () -> reports.add("nobody there"));
        assertThat(reports.poll(10, TimeUnit.SECONDS)).isEqualTo("nobody there");
    }

    @Test
    void shell_nonsense_isIgnoredAndTheNextRequestArrives() throws Exception {
        MessageCodec codec = new MessageCodec(connection.key(), WireLimits.STANDARD);
        List<byte[]> valid = codec.encode(
                new Envelope(Route.none(), Message.first(Header.create("first", "s", "u"), content("a", "b"))));
        try (ZMQ.Context context = ZMQ.context(1);
                ZMQ.Socket raw = context.socket(SocketType.DEALER)) {
            shakeHandsOrRetrySoon(raw);
            raw.connect(connection.address(Channel.SHELL));
            send(raw, List.of(bytes("garbage")));
            send(raw, List.of(bytes("<IDS|MSG>")));
            send(raw, List.of(new byte[0], new byte[0]));
            for (int length = 1; length < valid.size(); length++) {
                send(raw, valid.subList(0, length));
            }
            List<byte[]> badlySigned = new ArrayList<>(valid);
            badlySigned.set(1, bytes("0".repeat(64)));
            send(raw, badlySigned);
            send(raw, signed(codec, bytes("{"), bytes("{}")));
            send(raw, signed(codec, bytes("[1]"), bytes("{}")));
            send(raw, signed(codec, bytes("{\"msg_id\":7,\"msg_type\":\"x\"}"), bytes("{}")));
            send(raw, signed(codec, bytes("{\"msg_id\":\"\\"), new byte[] {(byte) 0xff, (byte) 0xfe}));
            send(raw, signed(codec, valid.get(2), bytes("{\"a\":".repeat(30) + "1" + "}".repeat(30))));
            List<byte[]> tooMany = new ArrayList<>(valid);
            tooMany.addAll(Collections.nCopies(20, bytes("buffer")));
            send(raw, tooMany);
            List<byte[]> tooLong = new ArrayList<>(valid);
            tooLong.addAll(Collections.nCopies(4, new byte[4000]));
            send(raw, tooLong);
            send(raw, valid);
            assertThat(next(atKernel).message().type()).isEqualTo("first");
            send(raw, valid);
            send(
                    raw,
                    codec.encode(new Envelope(
                            Route.none(), Message.first(Header.create("second", "s", "u"), content("a", "b")))));
            assertThat(next(atKernel).message().type())
                    .as("the replay is skipped")
                    .isEqualTo("second");
        }
    }

    @Test
    void shell_oversizeFrame_costsItsSenderTheConnectionOnly() throws Exception {
        try (ZMQ.Context context = ZMQ.context(1);
                ZMQ.Socket raw = context.socket(SocketType.DEALER)) {
            shakeHandsOrRetrySoon(raw);
            raw.connect(connection.address(Channel.SHELL));
            send(raw, List.of(new byte[100_000]));
            client.send(Channel.SHELL, client.request("kernel_info_request", content("a", "b")));
            assertThat(next(atKernel).message().type()).isEqualTo("kernel_info_request");
        }
    }

    @Test
    void shell_roundTrip_waitsForNoTimer() throws Exception {
        ConnectionFile other = ConnectionFile.create("countwright");
        BlockingQueue<Envelope> replies = new LinkedBlockingQueue<>();
        try (KernelSockets echo = KernelSockets.bind(other, WireLimits.STANDARD);
                ClientSockets fast = ClientSockets.connect(other, "tester", (channel, envelope) -> {
                    if (channel == Channel.SHELL) {
                        replies.add(envelope);
                    }
                })) {
            echo.start(echo::send);
            long[] nanos = new long[400];
            for (int i = 0; i < nanos.length; i++) {
                long start = System.nanoTime();
                fast.send(Channel.SHELL, fast.request("echo", content("a", "b")));
                next(replies);
                nanos[i] = System.nanoTime() - start;
            }
            long[] warm = Arrays.copyOfRange(nanos, 200, nanos.length);
            Arrays.sort(warm);
            Duration quick = Duration.ofNanos(warm[warm.length / 4]);
            // Typically 0.3 ms for two messages. Waiting by polling or for a delayed acknowledgement would hold up
            // every
            // message by 10 ms and more, a busy machine only some: hence the lower quartile.
            assertThat(quick).isLessThan(Duration.ofMillis(5));
        }
    }

    @Test
    void kernelSockets_takenPort_saysSoAndNamesIt() {
        assertThatThrownBy(() -> KernelSockets.bind(connection, SMALL))
                .isInstanceOf(IllegalStateException.class)
                .hasMessageContaining(connection.address(Channel.SHELL))
                .hasMessageContaining("taken");
    }

    @Test
    void send_fromInterruptedThread_stillArrives() throws Exception {
        Thread sender = new Thread(() -> {
            Thread.currentThread().interrupt();
            client.send(Channel.SHELL, client.request("one", content("a", "b")));
            client.send(Channel.SHELL, client.request("two", content("a", "b")));
        });
        sender.start();
        assertThat(next(atKernel).message().type()).isEqualTo("one");
        assertThat(next(atKernel).message().type()).isEqualTo("two");
    }

    /** See the same setting of {@link ClientSockets}. */
    private static void shakeHandsOrRetrySoon(ZMQ.Socket socket) {
        socket.setHandshakeIvl(400);
        socket.setLinger(0);
    }

    private static List<byte[]> signed(MessageCodec codec, byte[] header, byte[] content) {
        return codec.signedFrames(Route.none(), List.of(header, bytes("{}"), bytes("{}"), content));
    }

    private static void send(ZMQ.Socket socket, List<byte[]> frames) {
        for (int i = 0; i < frames.size(); i++) {
            socket.send(frames.get(i), i + 1 < frames.size() ? ZMQ.SNDMORE : 0);
        }
    }

    private static Envelope next(BlockingQueue<Envelope> queue) throws InterruptedException {
        Envelope envelope = queue.poll(10, TimeUnit.SECONDS);
        assertThat(envelope).as("a message within 10 s").isNotNull();
        return envelope;
    }

    private static Message nextOfType(BlockingQueue<Envelope> queue, String type) throws InterruptedException {
        Message message = next(queue).message();
        while (!message.type().equals(type)) {
            message = next(queue).message();
        }
        return message;
    }

    private static ObjectNode content(String name, String value) {
        return JsonNodeFactory.instance.objectNode().put(name, value);
    }

    private static byte[] bytes(String text) {
        return text.getBytes(StandardCharsets.UTF_8);
    }
}
