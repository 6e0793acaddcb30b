package countwright.kernel.wire;

import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import tools.jackson.core.JacksonException;
import tools.jackson.core.StreamReadConstraints;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * Turns messages into signed frames and back.
 *
 * <p>The frames are: route, the delimiter, the signature, header, parent header, metadata, content, raw buffers. The
 * signature is checked before anything is parsed, so that only holders of the key reach the parser. Used by any thread.
 */
final class MessageCodec {

    static final String DELIMITER = "<IDS|MSG>";

    private static final byte[] DELIMITER_FRAME = DELIMITER.getBytes(StandardCharsets.US_ASCII);
    private static final int JSON_FRAMES = 4;

    private final Signer signer;
    private final ReplayGuard replayGuard;
    private final JsonText json;

    MessageCodec(String key, WireLimits limits) {
        this.signer = new Signer(key);
        this.replayGuard = new ReplayGuard(ReplayGuard.STANDARD_CAPACITY);
        StreamReadConstraints constraints = StreamReadConstraints.builder()
                .maxNestingDepth(limits.jsonDepth())
                .maxStringLength(limits.frameBytes())
                .maxNumberLength(400)
                .build();
        this.json = new JsonText(constraints);
    }

    List<byte[]> encode(Envelope envelope) {
        Message message = envelope.message();
        List<byte[]> json = List.of(
                bytes(message.header().json()),
                message.parent()
                        .map(parent -> bytes(parent.json()))
                        .orElseGet(() -> bytes(JsonNodeFactory.instance.objectNode())),
                bytes(message.metadata()),
                bytes(message.content()));
        List<byte[]> frames = signedFrames(envelope.route(), json);
        frames.addAll(message.buffers());
        return frames;
    }

    /** Puts route, delimiter and signature in front of the four JSON frames. */
    List<byte[]> signedFrames(Route route, List<byte[]> json) {
        List<byte[]> frames = new ArrayList<>(route.frames());
        frames.add(DELIMITER_FRAME);
        frames.add(signer.sign(json));
        frames.addAll(json);
        return frames;
    }

    Envelope decode(List<byte[]> frames) throws MalformedMessageException {
        int delimiter = 0;
        while (delimiter < frames.size() && !Arrays.equals(frames.get(delimiter), DELIMITER_FRAME)) {
            delimiter++;
        }
        if (delimiter == frames.size()) {
            throw new MalformedMessageException("it has no delimiter among its " + frames.size() + " frames");
        }
        int firstJson = delimiter + 2;
        int firstBuffer = firstJson + JSON_FRAMES;
        if (frames.size() < firstBuffer) {
            throw new MalformedMessageException("it has " + (frames.size() - delimiter - 1)
                    + " frames after the delimiter, where at least " + (JSON_FRAMES + 1) + " are needed");
        }
        byte[] signature = frames.get(delimiter + 1);
        List<byte[]> json = frames.subList(firstJson, firstBuffer);
        if (!signer.verifies(signature, json)) {
            throw new MalformedMessageException("its signature does not fit the key of the connection file");
        }
        if (signer.isSigning() && !replayGuard.admits(signature)) {
            throw new MalformedMessageException("it was received before");
        }
        Message message = Message.received(
                Header.received(object(json.get(0), "header")),
                Header.receivedParent(object(json.get(1), "parent header")),
                object(json.get(2), "metadata"),
                object(json.get(3), "content"),
                frames.subList(firstBuffer, frames.size()));
        return new Envelope(Route.of(frames.subList(0, delimiter)), message);
    }

    private ObjectNode object(byte[] frame, String part) throws MalformedMessageException {
        JsonNode node;
        try {
            // Read leniently: a lone surrogate from a front end should not cost it the answer.
            node = json.read(new String(frame, StandardCharsets.UTF_8));
        } catch (JacksonException e) {
            // The parser's own text quotes the input, so only the kind of trouble is told.
            throw new MalformedMessageException(
                    "its " + part + " is not acceptable JSON (" + e.getClass().getSimpleName() + ")");
        }
        if (node instanceof ObjectNode object) {
            return object;
        }
        throw new MalformedMessageException("its " + part + " is not a JSON object");
    }

    /** Goes through a string because a lone surrogate, which any cell can print, must come out as '?', not fail. */
    private byte[] bytes(ObjectNode node) {
        return json.write(node).getBytes(StandardCharsets.UTF_8);
    }
}
