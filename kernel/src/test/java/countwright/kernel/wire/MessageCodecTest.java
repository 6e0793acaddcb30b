package countwright.kernel.wire;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

class MessageCodecTest {

    private static final String KEY = "a key for tests";

    private final MessageCodec codec = new MessageCodec(KEY, WireLimits.STANDARD);

    @Test
    void message_encodedAndDecoded_isTheSame() throws Exception {
        Envelope sent = new Envelope(Route.topic("kernel.status"), message());

        Envelope received = codec.decode(codec.encode(sent));

        assertThat(received.route()).isEqualTo(sent.route());
        assertThat(received.message().header()).isEqualTo(sent.message().header());
        assertThat(received.message().parent()).isEqualTo(sent.message().parent());
        assertThat(received.message().metadata()).isEqualTo(sent.message().metadata());
        assertThat(received.message().content()).isEqualTo(sent.message().content());
        assertThat(received.message().buffers()).containsExactly(new byte[] {0, -1}, new byte[0]);
    }

    @Test
    void signature_anySignedByteChanged_failsToFit() {
        List<byte[]> frames = codec.encode(new Envelope(Route.none(), message()));
        for (int frame = 1; frame <= 5; frame++) {
            for (int at = 0; at < frames.get(frame).length; at++) {
                List<byte[]> forged = new ArrayList<>(frames);
                byte[] changed = frames.get(frame).clone();
                changed[at] ^= 1;
                forged.set(frame, changed);
                assertThatThrownBy(() -> codec.decode(forged))
                        .isInstanceOf(MalformedMessageException.class)
                        .hasMessage("its signature does not fit the key of the connection file");
            }
        }
    }

    @Test
    void signature_knownMessage_isThePublishedDigest() {
        // RFC 4231, test case 2: key "Jefe", data "what do ya want for nothing?".
        Signer signer = new Signer("Jefe");
        List<byte[]> parts = List.of(
                "what do ya ".getBytes(StandardCharsets.US_ASCII),
                "want for nothing?".getBytes(StandardCharsets.US_ASCII));
        assertThat(signer.sign(parts))
                .asString(StandardCharsets.US_ASCII)
                .isEqualTo("5bdcc146bf60754e6a042426089575c75a003f089d2739839dec58b964ec3843");
    }

    @Test
    void decode_sameMessageTwice_refusesTheSecond() throws Exception {
        List<byte[]> frames = codec.encode(new Envelope(Route.none(), message()));
        codec.decode(frames);
        assertThatThrownBy(() -> codec.decode(frames)).hasMessage("it was received before");
    }

    @Test
    void decode_emptyKey_acceptsUnsigned() throws Exception {
        MessageCodec unsigned = new MessageCodec("", WireLimits.STANDARD);
        List<byte[]> frames = unsigned.encode(new Envelope(Route.none(), message()));
        assertThat(frames.get(1)).isEmpty();
        assertThat(unsigned.decode(frames).message().type()).isEqualTo("execute_request");
    }

    @Test
    void decode_deepJson_isRefusedWithoutQuotingIt() {
        byte[] empty = "{}".getBytes(StandardCharsets.UTF_8);
        byte[] deep = ("{\"secret\":" + "[".repeat(300) + "]".repeat(300) + "}").getBytes(StandardCharsets.UTF_8);
        MessageCodec reader = new MessageCodec(KEY, WireLimits.STANDARD);
        byte[] header = "{\"msg_id\":\"1\",\"msg_type\":\"t\"}".getBytes(StandardCharsets.UTF_8);
        List<byte[]> withHeader = codec.signedFrames(Route.none(), List.of(header, empty, empty, deep));
        assertThatThrownBy(() -> reader.decode(withHeader))
                .hasMessageStartingWith("its content is not acceptable JSON")
                .hasMessageNotContaining("secret");
    }

    @Test
    void encode_loneSurrogate_comesOutAsAQuestionMark() throws Exception {
        ObjectNode content = JsonNodeFactory.instance.objectNode().put("text", "a\ud83db");
        Message message = Message.first(Header.create("stream", "s", "u"), content);
        Envelope received = codec.decode(codec.encode(new Envelope(Route.none(), message)));
        assertThat(received.message().content().path("text").stringValue()).isEqualTo("a?b");
    }

    @Test
    void replayGuard_full_forgetsTheOldest() {
        ReplayGuard guard = new ReplayGuard(2);
        byte[] a = {1};
        assertThat(guard.admits(a)).isTrue();
        assertThat(guard.admits(new byte[] {2})).isTrue();
        assertThat(guard.admits(a)).isFalse();
        assertThat(guard.admits(new byte[] {3})).isTrue();
        assertThat(guard.admits(a)).as("forgotten").isTrue();
    }

    private static Message message() {
        ObjectNode content = JsonNodeFactory.instance.objectNode().put("code", "\"grüß 😀\"");
        content.putObject("user_expressions").put("x", "1 + 1");
        Header parent = Header.create("parent_request", "session", "someone");
        return Message.caused(Header.create("execute_request", "session", "someone"), parent, content)
                .withMetadata(JsonNodeFactory.instance.objectNode().put("cellId", "c1"))
                .withBuffers(List.of(new byte[] {0, -1}, new byte[0]));
    }
}
