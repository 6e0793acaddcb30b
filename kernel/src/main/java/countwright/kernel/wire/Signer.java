package countwright.kernel.wire;

import java.nio.charset.StandardCharsets;
import java.security.GeneralSecurityException;
import java.security.MessageDigest;
import java.util.HexFormat;
import java.util.List;
import javax.crypto.Mac;
import javax.crypto.spec.SecretKeySpec;

/**
 * Signs the four JSON frames of a message with HMAC-SHA256 (RFC 2104, FIPS 198-1), in lower-case hexadecimal as the
 * protocol asks. With an empty key messages are unsigned, the signature frame is empty and everything is accepted.
 *
 * <p>May be used by any thread.
 */
final class Signer {

    private static final String ALGORITHM = "HmacSHA256";
    private static final byte[] UNSIGNED = new byte[0];

    private final boolean signing;
    private final byte[] key;

    /** Prepared once a thread, since a Mac belongs to one thread and looking one up costs more than a short message. */
    private final ThreadLocal<Mac> mac = ThreadLocal.withInitial(this::newMac);

    Signer(String key) {
        this.signing = !key.isEmpty();
        this.key = key.getBytes(StandardCharsets.UTF_8);
    }

    boolean isSigning() {
        return signing;
    }

    byte[] sign(List<byte[]> frames) {
        if (!signing) {
            return UNSIGNED;
        }
        Mac prepared = mac.get();
        frames.forEach(prepared::update);
        return HexFormat.of().formatHex(prepared.doFinal()).getBytes(StandardCharsets.US_ASCII);
    }

    /** Says whether a signature belongs to frames, in a time that does not depend on how much of it is right. */
    boolean verifies(byte[] signature, List<byte[]> frames) {
        return !signing || MessageDigest.isEqual(signature, sign(frames));
    }

    private Mac newMac() {
        try {
            Mac newMac = Mac.getInstance(ALGORITHM);
            newMac.init(new SecretKeySpec(key, ALGORITHM));
            return newMac;
        } catch (GeneralSecurityException e) {
            throw new IllegalStateException(
                    "this Java runtime lacks " + ALGORITHM + ", which every runtime must have. Reinstall the JDK.", e);
        }
    }
}
