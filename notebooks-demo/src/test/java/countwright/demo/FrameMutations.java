package countwright.demo;

import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Collections;
import java.util.List;
import java.util.Random;

/** Spoils well-formed messages, always in the same ways for the same seed. */
final class FrameMutations {

    private static final List<String> ODD_JSON = List.of(
            "",
            "{",
            "}",
            "[]",
            "null",
            "7",
            "\"text\"",
            "{} {}",
            "{}x",
            "{\"a\":1,\"a\":{}}",
            "{\"msg_id\":\"1\",\"msg_id\":2,\"msg_type\":\"execute_request\"}",
            "{\"n\":" + "9".repeat(500) + "}",
            "{\"n\":1e" + "9".repeat(50) + "}",
            "{\"a\":" + "[".repeat(5000),
            "{\"a\":" + "{\"a\":".repeat(250) + "1" + "}".repeat(251),
            "{\"a\":\"" + "x".repeat(200_000) + "\"}",
            "{\"a\":NaN}",
            "{\"a\":1e9999}",
            "{'a':1}",
            "{\"a\":\"\\ud800\"}",
            "/* c */{}");

    private final Random random;
    private final SignedFrames signer;
    private final List<List<byte[]>> sentBefore = new ArrayList<>();

    FrameMutations(Random random, SignedFrames signer) {
        this.random = random;
        this.signer = signer;
    }

    /** A message that is wrong in one way. */
    List<byte[]> next() {
        List<byte[]> whole = whole();
        return switch (random.nextInt(13)) {
            case 0 -> changedByte(whole);
            case 1 -> whole.subList(0, random.nextInt(whole.size() - 1) + 1);
            case 2 -> without(whole, random.nextInt(whole.size()));
            case 3 -> without(whole, 0);
            case 4 -> swapped(whole);
            case 5 -> withFrames(whole, 1 + random.nextInt(400));
            case 6 -> withSignature(whole, wrongSignature(whole.get(1)));
            case 7 -> replayed(whole);
            case 8 -> resigned(whole, random.nextInt(4), oddJson());
            case 9 -> resigned(whole, random.nextInt(4), invalidText());
            case 10 -> unknownType();
            case 11 -> cutFrame(whole);
            default -> noise();
        };
    }

    private List<byte[]> whole() {
        List<String> types = new ArrayList<>(RequestForms.types());
        // Spoilt, it might still be one, and then the kernel would rightly end.
        types.remove("shutdown_request");
        RequestForms.Form form = RequestForms.valid(types.get(random.nextInt(types.size())));
        return signer.of(form.header(), form.parent(), form.metadata(), form.content());
    }

    private List<byte[]> changedByte(List<byte[]> whole) {
        List<byte[]> changed = new ArrayList<>(whole);
        int frame = random.nextInt(changed.size());
        byte[] bytes = changed.get(frame).clone();
        if (bytes.length > 0) {
            bytes[random.nextInt(bytes.length)] ^= (byte) (1 << random.nextInt(8));
        }
        changed.set(frame, bytes);
        // Half of them with a signature that fits, so that they get further.
        return random.nextBoolean() && frame > 1 ? signer.of(changed.subList(2, changed.size())) : changed;
    }

    private static List<byte[]> without(List<byte[]> whole, int frame) {
        List<byte[]> fewer = new ArrayList<>(whole);
        fewer.remove(frame);
        return fewer;
    }

    private List<byte[]> swapped(List<byte[]> whole) {
        List<byte[]> json = new ArrayList<>(whole.subList(2, whole.size()));
        Collections.shuffle(json, random);
        return signer.of(json);
    }

    private List<byte[]> withFrames(List<byte[]> whole, int count) {
        List<byte[]> more = new ArrayList<>(whole);
        for (int i = 0; i < count; i++) {
            more.add(random.nextInt(more.size()), bytes(random.nextInt(40)));
        }
        return more;
    }

    private static List<byte[]> withSignature(List<byte[]> whole, byte[] signature) {
        List<byte[]> forged = new ArrayList<>(whole);
        forged.set(1, signature);
        return forged;
    }

    private byte[] wrongSignature(byte[] right) {
        return switch (random.nextInt(5)) {
            case 0 -> new byte[0];
            case 1 -> new byte[100_000];
            case 2 -> ("0" + new String(right, StandardCharsets.US_ASCII)).getBytes(StandardCharsets.US_ASCII);
            case 3 -> bytes(right.length);
            default -> Arrays.copyOf(right, right.length - 1);
        };
    }

    /** Half the time one that went out long ago. */
    private List<byte[]> replayed(List<byte[]> whole) {
        if (sentBefore.isEmpty() || random.nextBoolean()) {
            sentBefore.add(whole);
            return whole;
        }
        return sentBefore.get(random.nextInt(sentBefore.size()));
    }

    private List<byte[]> resigned(List<byte[]> whole, int part, byte[] replacement) {
        List<byte[]> json = new ArrayList<>(whole.subList(2, whole.size()));
        json.set(part, replacement);
        return signer.of(json);
    }

    private byte[] oddJson() {
        return ODD_JSON.get(random.nextInt(ODD_JSON.size())).getBytes(StandardCharsets.UTF_8);
    }

    private byte[] invalidText() {
        byte[] text = ("{\"" + RequestForms.secret() + "\":\"????\"}").getBytes(StandardCharsets.UTF_8);
        for (int i = text.length - 6; i < text.length - 2; i++) {
            text[i] = (byte) (0x80 | random.nextInt(128));
        }
        return text;
    }

    private List<byte[]> unknownType() {
        RequestForms.Form form = RequestForms.valid("kernel_info_request");
        String[] types = {RequestForms.secret() + "_request", "request", "_request", "x".repeat(100_000), "\u0000", " "
        };
        form.header().put("msg_type", types[random.nextInt(types.length)]);
        return signer.of(form.header(), form.parent(), form.metadata(), form.content());
    }

    private List<byte[]> cutFrame(List<byte[]> whole) {
        List<byte[]> json = new ArrayList<>(whole.subList(2, whole.size()));
        int part = random.nextInt(json.size());
        byte[] frame = json.get(part);
        json.set(part, Arrays.copyOf(frame, random.nextInt(frame.length)));
        return signer.of(json);
    }

    private List<byte[]> noise() {
        List<byte[]> frames = new ArrayList<>();
        int count = 1 + random.nextInt(12);
        for (int i = 0; i < count; i++) {
            frames.add(random.nextInt(4) == 0 ? SignedFrames.DELIMITER : bytes(random.nextInt(300)));
        }
        return frames;
    }

    private byte[] bytes(int length) {
        byte[] bytes = new byte[length];
        random.nextBytes(bytes);
        return bytes;
    }
}
