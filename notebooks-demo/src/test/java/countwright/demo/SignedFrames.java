package countwright.demo;

import java.nio.charset.StandardCharsets;
import java.security.GeneralSecurityException;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.List;
import javax.crypto.Mac;
import javax.crypto.spec.SecretKeySpec;
import tools.jackson.databind.node.ObjectNode;

/** Signs any four frames with the key of a connection, whatever they hold. */
final class SignedFrames {

    static final byte[] DELIMITER = "<IDS|MSG>".getBytes(StandardCharsets.US_ASCII);

    private static final String ALGORITHM = "HmacSHA256";

    private final String key;

    SignedFrames(String key) {
        this.key = key;
    }

    /** Delimiter, signature and the frames. */
    List<byte[]> of(List<byte[]> json) {
        List<byte[]> frames = new ArrayList<>();
        frames.add(DELIMITER);
        frames.add(signature(json));
        frames.addAll(json);
        return frames;
    }

    List<byte[]> of(ObjectNode header, ObjectNode parent, ObjectNode metadata, ObjectNode content) {
        return of(List.of(bytes(header), bytes(parent), bytes(metadata), bytes(content)));
    }

    byte[] signature(List<byte[]> json) {
        try {
            Mac mac = Mac.getInstance(ALGORITHM);
            mac.init(new SecretKeySpec(key.getBytes(StandardCharsets.UTF_8), ALGORITHM));
            json.forEach(mac::update);
            return HexFormat.of().formatHex(mac.doFinal()).getBytes(StandardCharsets.US_ASCII);
        } catch (GeneralSecurityException e) {
            throw new IllegalStateException(e);
        }
    }

    static byte[] bytes(ObjectNode node) {
        return node.toString().getBytes(StandardCharsets.UTF_8);
    }
}
