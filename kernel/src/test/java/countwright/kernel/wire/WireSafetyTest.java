package countwright.kernel.wire;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.net.InetAddress;
import java.net.Socket;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
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

/** What someone who reaches the ports but has no key can and cannot do. */
@Timeout(60)
@SuppressWarnings("NullAway.Init")
class WireSafetyTest {

    private final ConnectionFile connection = ConnectionFile.create("countwright");
    private final MessageCodec codec = new MessageCodec(connection.key(), WireLimits.STANDARD);
    private final BlockingQueue<Envelope> atKernel = new LinkedBlockingQueue<>();
    private KernelSockets kernel;
    private LogCapture log;
    private ZMQ.Context context;

    @BeforeEach
    void bind() {
        log = new LogCapture();
        kernel = KernelSockets.bind(connection, WireLimits.STANDARD);
        kernel.start((channel, envelope) -> atKernel.add(envelope));
        context = ZMQ.context(1);
    }

    @AfterEach
    void close() {
        context.close();
        kernel.close();
        log.close();
    }

    @Test
    void message_recordedOnOneChannel_isRefusedOnAnother() throws Exception {
        List<byte[]> recorded = codec.encode(new Envelope(Route.none(), request("first")));
        try (ZMQ.Socket shell = dealer(Channel.SHELL, "a");
                ZMQ.Socket control = dealer(Channel.CONTROL, "b")) {
            send(shell, recorded);
            assertThat(nextType()).isEqualTo("first");
            send(control, recorded);
            send(control, codec.encode(new Envelope(Route.none(), request("second"))));
            assertThat(nextType()).isEqualTo("second");
        }
        assertThat(log.lines()).contains("WARNING Ignored a message on control: it was received before.");
    }

    @Test
    void kernelsOwnMessage_sentBackToIt_isNoRequest() throws Exception {
        try (ZMQ.Socket listener = context.socket(SocketType.SUB);
                ZMQ.Socket shell = dealer(Channel.SHELL, "a")) {
            listener.setHandshakeIvl(400);
            listener.setReceiveTimeOut(10_000);
            listener.subscribe("");
            listener.connect(connection.address(Channel.IOPUB));
            assertThat(receive(listener)).as("the welcome").isNotEmpty();
            Message comm = Message.first(Header.create("comm_msg", kernel.session(), "kernel"), content("a", "b"));
            kernel.send(Channel.IOPUB, new Envelope(Route.topic("t"), comm));

            List<byte[]> heard = receive(listener);
            send(shell, heard.subList(1, heard.size()));
            send(shell, codec.encode(new Envelope(Route.none(), request("next"))));

            assertThat(nextType()).isEqualTo("next");
        }
        assertThat(log.lines()).contains("WARNING Ignored a message on shell: it is one of this kernel's own.");
    }

    @Test
    void namesakeWithoutTheKey_getsNoReplyMeantForTheOther() throws Exception {
        try (ZMQ.Socket owner = dealer(Channel.SHELL, "same")) {
            send(owner, codec.encode(new Envelope(Route.none(), request("first"))));
            Envelope first = next();
            try (ZMQ.Socket namesake = dealer(Channel.SHELL, "same")) {
                send(namesake, List.of(bytes("no message")));
                awaitLog("Ignored a message on shell: it has no delimiter");

                kernel.send(Channel.SHELL, new Envelope(first.route(), request("reply")));

                assertThat(codec.decode(receive(owner)).message().type()).isEqualTo("reply");
                namesake.setReceiveTimeOut(0);
                assertThat(namesake.recv()).isNull();
            }
        }
    }

    @Test
    void frontEndThatConnectsAgain_getsItsRepliesOnTheNewConnection() throws Exception {
        try (ZMQ.Socket old = dealer(Channel.SHELL, "same");
                ZMQ.Socket fresh = dealer(Channel.SHELL, "same")) {
            send(old, codec.encode(new Envelope(Route.none(), request("first"))));
            next();
            send(fresh, codec.encode(new Envelope(Route.none(), request("second"))));

            kernel.send(Channel.SHELL, new Envelope(next().route(), request("reply")));

            assertThat(codec.decode(receive(fresh)).message().type()).isEqualTo("reply");
        }
    }

    @Test
    void contents_ofAnyMessage_stayOutOfTheLog() throws Exception {
        try (ZMQ.Socket shell = dealer(Channel.SHELL, "a")) {
            Message secret = Message.first(Header.create("execute_request", "s", "u"), content("code", "secret"));
            send(shell, codec.encode(new Envelope(Route.none(), secret)));
            assertThat(nextType()).isEqualTo("execute_request");
            send(
                    shell,
                    codec.signedFrames(
                            Route.none(), List.of(bytes("{\"secret\""), bytes("{}"), bytes("{}"), bytes("{}"))));
            awaitLog("its header is not acceptable JSON");
        }
        assertThat(log.lines()).noneMatch(line -> line.contains("secret"));
    }

    @Test
    void contents_asked_areInTheLogAndCut() {
        MessageLog silent = new MessageLog(Optional.of("message, nothing"));
        silent.received(Channel.SHELL, request("silent"));
        assertThat(log.lines()).isEmpty();

        MessageLog asked = new MessageLog(Optional.of("other, messages"));
        asked.received(Channel.SHELL, Message.first(Header.create("t", "s", "u"), content("code", "1 + 1")));
        asked.sent(Channel.IOPUB, Message.first(Header.create("t", "s", "u"), content("text", "x".repeat(20_000))));

        assertThat(log.lines()).hasSize(2);
        assertThat(log.lines().get(0)).startsWith("INFO received on shell: t ").endsWith("{\"code\":\"1 + 1\"}");
        assertThat(log.lines().get(1)).startsWith("INFO sent on iopub: t ").hasSizeLessThan(11_000);
    }

    @Test
    void nonsenseForHours_doesNotFillTheLog() {
        Complaints complaints = new Complaints();
        for (int i = 0; i < 10_000; i++) {
            complaints.tell("complaint " + i);
        }
        assertThat(log.lines()).hasSize(50);
    }

    @Test
    void peersThatSayNothing_areRefusedBeyondALimitAndTheRestGoesOn() throws Exception {
        List<Socket> idle = new ArrayList<>();
        try {
            for (int i = 0; i < 401; i++) {
                idle.add(new Socket(InetAddress.getLoopbackAddress(), connection.port(Channel.HEARTBEAT)));
            }
            awaitLog("Refused a connection on heartbeat: 400 are open.");
        } finally {
            for (Socket socket : idle) {
                socket.close();
            }
        }
        try (ClientSockets client = ClientSockets.connect(connection, "u", (channel, envelope) -> {})) {
            client.beat().get(20, TimeUnit.SECONDS);
        }
    }

    @Test
    void addressThatOthersReach_isWarnedOf() {
        ConnectionFile open =
                ConnectionFile.parse(ConnectionFile.create("x").toJson().replace("127.0.0.1", "0.0.0.0"), "f.json");
        KernelSockets.bind(open, WireLimits.STANDARD).close();
        assertThat(log.lines())
                .singleElement()
                .asString()
                .startsWith("WARNING The kernel listens on 0.0.0.0, which other machines may reach");
    }

    @Test
    void emptyKey_isWarnedOf() {
        ConnectionFile unsigned = ConnectionFile.parse(
                ConnectionFile.create("x").toJson().replaceAll("\"key\" : \"[0-9a-f]+\"", "\"key\" : \"\""), "f.json");
        assertThat(unsigned.key()).isEmpty();
        KernelSockets.bind(unsigned, WireLimits.STANDARD).close();
        assertThat(log.lines()).singleElement().asString().startsWith("WARNING The key is empty");
    }

    @Test
    void limits_inLittleMemory_areLower() {
        assertThat(WireLimits.fitting(8L << 30).frameBytes()).isEqualTo(64 << 20);
        assertThat(WireLimits.fitting(256L << 20).frameBytes()).isEqualTo(16 << 20);
        assertThat(WireLimits.fitting(1).frameBytes()).isEqualTo(1 << 20);
    }

    private ZMQ.Socket dealer(Channel channel, String identity) {
        ZMQ.Socket socket = context.socket(SocketType.DEALER);
        // See the same setting of ClientSockets.
        socket.setHandshakeIvl(400);
        socket.setLinger(0);
        // Longer than the stall that the setting above mostly cures.
        socket.setReceiveTimeOut(45_000);
        socket.setIdentity(bytes(identity));
        socket.connect(connection.address(channel));
        return socket;
    }

    private static void send(ZMQ.Socket socket, List<byte[]> frames) {
        for (int i = 0; i < frames.size(); i++) {
            socket.send(frames.get(i), i + 1 < frames.size() ? ZMQ.SNDMORE : 0);
        }
    }

    private static List<byte[]> receive(ZMQ.Socket socket) throws IOException {
        List<byte[]> frames = new ArrayList<>();
        do {
            byte[] frame = socket.recv();
            if (frame == null) {
                throw new IOException("nothing came within 10 s");
            }
            frames.add(frame);
        } while (socket.hasReceiveMore());
        return frames;
    }

    private Envelope next() throws InterruptedException {
        Envelope envelope = atKernel.poll(45, TimeUnit.SECONDS);
        assertThat(envelope).as("a message within 45 s").isNotNull();
        return envelope;
    }

    private String nextType() throws InterruptedException {
        return next().message().type();
    }

    private void awaitLog(String part) throws InterruptedException {
        long end = System.nanoTime() + TimeUnit.SECONDS.toNanos(10);
        while (log.lines().stream().noneMatch(line -> line.contains(part))) {
            assertThat(System.nanoTime())
                    .as("time to see '" + part + "' in the log")
                    .isLessThan(end);
            Thread.sleep(5);
        }
    }

    private static Message request(String type) {
        return Message.first(Header.create(type, "s", "u"), content("a", "b"));
    }

    private static ObjectNode content(String name, String value) {
        return JsonNodeFactory.instance.objectNode().put(name, value);
    }

    private static byte[] bytes(String text) {
        return text.getBytes(StandardCharsets.UTF_8);
    }
}
