package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ClientSockets;
import countwright.kernel.wire.Message;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Random;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.Callable;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;
import tools.jackson.databind.node.ObjectNode;

/**
 * Nothing that arrives on a socket ends or silences the installed kernel, which has little memory here. The seed can be
 * set with {@code -Dcountwright.fuzz.seed}.
 */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
@Timeout(300)
class KernelFuzzTest {

    private static final long SEED = Long.getLong("countwright.fuzz.seed", 20_260_301L);
    private static final int MUTATIONS = 3_000;
    private static final int BATCH = 100;
    private static final int VAGRANTS_A_BATCH = 3;
    private static final Duration BOUND = Duration.ofSeconds(10);
    private static final long RESIDENT_MEGABYTES = 192 + 240;
    private static final System.Logger LOG = System.getLogger(KernelFuzzTest.class.getName());

    @TempDir
    private static Path temporary;

    private static Optional<LiveKernel> started = Optional.empty();

    private final Random random = new Random(SEED);
    private final SignedFrames signer = new SignedFrames(kernel().connection().key());
    private int probes;

    @BeforeAll
    static void start() throws Exception {
        LOG.log(System.Logger.Level.INFO, "The seed is " + SEED + ".");
        started = Optional.of(LiveKernel.start(temporary, temporary, Map.of("JAVA_TOOL_OPTIONS", "-Xmx192m")));
    }

    @AfterAll
    static void end() {
        kernel().close();
    }

    @AfterEach
    void kernelLivesWithinItsMemoryAndSaidNothingSecret() throws Exception {
        probe();
        String log = Files.readString(temporary.resolve("kernel.log"));
        assertThat(log.length()).as("length of the log, seed " + SEED).isLessThan(1_000_000);
        assertThat(log)
                .as("seed " + SEED)
                .doesNotContain(RequestForms.secret())
                .doesNotContain("OutOfMemory")
                .doesNotContain("SEVERE");
        Path status = Path.of("/proc/" + kernel().process().pid() + "/status");
        if (Files.exists(status)) {
            long megabytes = Files.readAllLines(status).stream()
                    .filter(line -> line.startsWith("VmHWM:"))
                    .mapToLong(line -> Long.parseLong(line.replaceAll("\\D", "")) / 1024)
                    .findFirst()
                    .orElse(0);
            assertThat(megabytes).as("MB of the kernel, seed " + SEED).isLessThan(RESIDENT_MEGABYTES);
        }
    }

    @Test
    void wrongMessagesAndClients_betweenThem_everyValidRequestIsAnswered() throws Exception {
        List<List<byte[]>> messages = wrongMessages();
        assertThat(messages.size()).isGreaterThan(5_000);
        try (RawPeer shell =
                        RawPeer.joined(port(Channel.SHELL), "DEALER", "fuzz").readGreeting();
                RawPeer control =
                        RawPeer.joined(port(Channel.CONTROL), "DEALER", "fuzz").readGreeting();
                RawPeer stdin =
                        RawPeer.joined(port(Channel.STDIN), "DEALER", "fuzz").readGreeting();
                Vagrants vagrants = new Vagrants(kernel().connection(), random)) {
            for (int i = 0; i < messages.size(); i++) {
                List.of(shell, control, shell, control, stdin)
                        .get(random.nextInt(5))
                        .sendMessage(messages.get(i));
                if (i % BATCH == BATCH - 1) {
                    for (int j = 0; j < VAGRANTS_A_BATCH; j++) {
                        vagrants.visit();
                    }
                    within("control", () -> kernelInfo(control));
                    within("shell", () -> kernelInfo(shell));
                    probe();
                }
            }
            assertThat(vagrants.count()).isGreaterThan(200);
            LOG.log(
                    System.Logger.Level.INFO,
                    messages.size() + " wrong messages, " + vagrants.count() + " clients, " + probes
                            + " valid requests answered.");
        }
    }

    @Test
    void frameOnlyAnnounced_byManyClients_takesNoMemory() throws Exception {
        List<RawPeer> peers = new ArrayList<>();
        for (Channel channel : Channel.values()) {
            for (int i = 0; i < 100; i++) {
                RawPeer peer = RawPeer.joined(port(channel), "DEALER", "");
                peer.send(RawPeer.headerOnly(8 << 20));
                peer.send(new byte[100]);
                peers.add(peer);
            }
        }
        probe();
        for (RawPeer peer : peers) {
            peer.reset();
        }
    }

    @Test
    void unfinishedFrames_withoutTheKey_endBeforeTheyFillTheMemory() throws Exception {
        List<RawPeer> peers = new ArrayList<>();
        for (int i = 0; i < 40; i++) {
            RawPeer peer = RawPeer.joined(port(Channel.SHELL), "DEALER", "");
            peers.add(peer);
            boolean begun = takes(peer, RawPeer.headerOnly(8 << 20)) && takes(peer, new byte[6 << 20]);
            LOG.log(System.Logger.Level.DEBUG, "Client {0} sent all: {1}.", i, begun);
        }
        // Each byte more stays within the frame; five such clients are as many as may leave that much unfinished.
        long end = System.nanoTime() + BOUND.toNanos();
        while (peers.stream().filter(peer -> takes(peer, new byte[1])).count() > 5) {
            assertThat(System.nanoTime()).as("time for clients to be refused").isLessThan(end);
            Thread.sleep(50);
        }
        probe();
        for (RawPeer peer : peers) {
            peer.reset();
        }
    }

    @Test
    void frameTooLong_costsItsSenderTheConnection() throws Exception {
        for (Channel channel : Channel.values()) {
            try (RawPeer peer = RawPeer.joined(port(channel), "DEALER", "")) {
                peer.send(RawPeer.headerOnly(1L << 40));
                peer.awaitEnd();
            }
        }
        probe();
    }

    @Test
    void inputReply_fromAnotherSession_isNotTaken() throws Exception {
        BlockingQueue<Message> heard = new LinkedBlockingQueue<>();
        BlockingQueue<Message> heardByOther = new LinkedBlockingQueue<>();
        try (ClientSockets asked = client(heard);
                ClientSockets other = client(heardByOther)) {
            asked.subscribed().get(20, TimeUnit.SECONDS);
            Message cell = asked.request(
                    "execute_request", json("{'allow_stdin':true}").put("code", "ask(\"name? \")"));
            asked.send(Channel.SHELL, cell);
            Message question = next(heard, "input_request");

            int ignored = ignoredReplies();
            other.send(Channel.STDIN, other.answer("input_reply", question, json("{'value':'wrong'}")));
            other.send(Channel.STDIN, other.request("input_reply", json("{'value':'wrong'}")));
            replyFromNamesakeWithoutKey(asked.session());
            while (ignoredReplies() < ignored + 2) {
                Thread.sleep(10);
            }
            asked.send(Channel.STDIN, asked.answer("input_reply", question, json("{'value':'right'}")));

            Message result = next(heard, "execute_result");
            assertThat(result.content().at("/data/text~1plain").asString("")).contains("right");
            assertThat(heardByOther.stream().map(Message::type)).doesNotContain("input_request");
        }
    }

    /** A client that claims the asked one's identity but has no key, after the question was sent. */
    private static void replyFromNamesakeWithoutKey(String identity) throws IOException {
        try (RawPeer namesake =
                RawPeer.joined(port(Channel.STDIN), "DEALER", identity).readGreeting()) {
            RequestForms.Form reply = RequestForms.valid("input_reply");
            namesake.sendMessage(
                    new SignedFrames("not the key").of(reply.header(), json("{}"), reply.metadata(), reply.content()));
            namesake.ping();
        }
    }

    private static boolean takes(RawPeer peer, byte[] bytes) {
        try {
            peer.send(bytes);
            return true;
        } catch (IOException refused) {
            return false;
        }
    }

    private static int ignoredReplies() throws IOException {
        return (int) Files.readString(temporary.resolve("kernel.log"))
                .lines()
                .filter(line -> line.contains("Ignored an input_reply: no question to that front end is open."))
                .count();
    }

    private static ClientSockets client(BlockingQueue<Message> heard) {
        return ClientSockets.connect(
                kernel().connection(), "tester", (channel, envelope) -> heard.add(envelope.message()));
    }

    private static Message next(BlockingQueue<Message> heard, String type) throws InterruptedException {
        while (true) {
            Message message = heard.poll(30, TimeUnit.SECONDS);
            assertThat(message).as("a message of type " + type).isNotNull();
            if (message != null && message.type().equals(type)) {
                return message;
            }
        }
    }

    private List<List<byte[]>> wrongMessages() {
        List<List<byte[]>> messages = new ArrayList<>();
        for (RequestForms.Form form : RequestForms.wrongInOneField()) {
            messages.add(signer.of(form.header(), form.parent(), form.metadata(), form.content()));
        }
        FrameMutations mutations = new FrameMutations(random, signer);
        for (int i = 0; i < MUTATIONS; i++) {
            messages.add(mutations.next());
        }
        Collections.shuffle(messages, random);
        return messages;
    }

    /** Valid requests of an orderly front end: every answer must come in time and be right. */
    private void probe() throws Exception {
        probes++;
        JsonNode info = within("kernel_info", () -> kernel().ask(Channel.CONTROL, "kernel_info_request", json("{}")))
                .content();
        assertThat(info.path("implementation").asString("")).isEqualTo("countwright");
        // What an odd request behind it makes fail aborts the cells that wait, so those are waited for first.
        within("the cells before", () -> kernel().run(""));
        assertThat(within("execute", () -> kernel().run(probes + " * 7")))
                .as("seed " + SEED)
                .isEqualTo(new LiveKernel.Outcome("", Integer.toString(probes * 7), ""));
        switch (probes % 4) {
            case 0 ->
                assertThat(ask("complete_request", "{'code':'Strin','cursor_pos':5}")
                                .path("matches")
                                .toString())
                        .contains("\"String\"");
            case 1 ->
                assertThat(ask("is_complete_request", "{'code':'int x ='}")
                                .path("status")
                                .asString(""))
                        .isEqualTo("incomplete");
            case 2 ->
                assertThat(ask("history_request", "{'hist_access_type':'tail','n':1,'output':false,'raw':true}")
                                .path("history")
                                .toString())
                        .contains(probes + " * 7");
            default ->
                assertThat(ask("comm_info_request", "{}").path("status").asString(""))
                        .isEqualTo("ok");
        }
        kernel().forget();
    }

    private JsonNode ask(String type, String content) throws Exception {
        return within(type, () -> kernel().ask(Channel.SHELL, type, json(content)))
                .content();
    }

    private static ObjectNode json(String text) {
        return RequestForms.json(text);
    }

    private static <T> T within(String what, Callable<T> action) throws Exception {
        long start = System.nanoTime();
        T result = action.call();
        assertThat(Duration.ofNanos(System.nanoTime() - start))
                .as("time for " + what + ", seed " + SEED)
                .isLessThan(BOUND);
        return result;
    }

    /** A valid request on the very connection that sends the wrong messages. */
    private boolean kernelInfo(RawPeer peer) throws IOException {
        RequestForms.Form form = RequestForms.valid("kernel_info_request");
        String id = form.header().path("msg_id").asString("");
        peer.sendMessage(signer.of(form.header(), json("{}"), json("{}"), json("{}")));
        while (true) {
            List<byte[]> frames = peer.receive();
            assertThat(frames).hasSizeGreaterThanOrEqualTo(6);
            assertThat(frames.get(1)).isEqualTo(signer.signature(frames.subList(2, 6)));
            JsonNode parent = read(frames.get(3));
            if (parent.path("msg_id").asString("").equals(id)) {
                assertThat(read(frames.get(2)).path("msg_type").asString("")).isEqualTo("kernel_info_reply");
                assertThat(read(frames.get(5)).path("status").asString("")).isEqualTo("ok");
                return true;
            }
        }
    }

    private static JsonNode read(byte[] frame) {
        return JsonMapper.shared().readTree(new String(frame, StandardCharsets.UTF_8));
    }

    private static int port(Channel channel) {
        return kernel().connection().port(channel);
    }

    private static LiveKernel kernel() {
        return started.orElseThrow();
    }
}
