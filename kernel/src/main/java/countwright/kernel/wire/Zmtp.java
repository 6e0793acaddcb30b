package countwright.kernel.wire;

import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.HashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/**
 * The bytes of the ZeroMQ Message Transport Protocol 3.0 (RFC 23/ZMTP) with the NULL mechanism: greeting, READY command
 * and the headers of frames. We announce minor version 0, so peers of 3.1 speak 3.0 to us.
 */
final class Zmtp {

    static final int GREETING_BYTES = 64;

    static final int MORE = 1;
    static final int LONG = 2;
    static final int COMMAND = 4;

    private static final int SIGNATURE_END = 9;
    private static final int VERSION_AT = 10;
    private static final int MECHANISM_AT = 12;
    private static final int MECHANISM_BYTES = 20;
    private static final byte[] NULL_MECHANISM =
            Arrays.copyOf("NULL".getBytes(StandardCharsets.US_ASCII), MECHANISM_BYTES);
    private static final int SHORTEST_LONG = 256;

    private Zmtp() {}

    static byte[] greeting() {
        byte[] greeting = new byte[GREETING_BYTES];
        greeting[0] = (byte) 0xff;
        greeting[SIGNATURE_END] = 0x7f;
        greeting[VERSION_AT] = 3;
        System.arraycopy(NULL_MECHANISM, 0, greeting, MECHANISM_AT, MECHANISM_BYTES);
        return greeting;
    }

    /** Refuses what no peer of ours begins with, as early as the first bytes show it. */
    static void checkGreeting(byte[] greeting, int length) throws WireViolation {
        if ((length > 0 && greeting[0] != (byte) 0xff)
                || (length > SIGNATURE_END && (greeting[SIGNATURE_END] & 1) != 1)
                || (length > VERSION_AT && greeting[VERSION_AT] < 3)) {
            throw new WireViolation("it does not speak ZMTP 3");
        }
        if (length == GREETING_BYTES
                && !Arrays.equals(
                        NULL_MECHANISM, Arrays.copyOfRange(greeting, MECHANISM_AT, MECHANISM_AT + MECHANISM_BYTES))) {
            throw new WireViolation("it asks for a security mechanism other than NULL");
        }
    }

    static byte[] ready(String socketType) {
        byte[] name = "Socket-Type".getBytes(StandardCharsets.US_ASCII);
        byte[] value = socketType.getBytes(StandardCharsets.US_ASCII);
        ByteBuffer body = ByteBuffer.allocate(6 + 1 + name.length + 4 + value.length);
        body.put((byte) 5).put("READY".getBytes(StandardCharsets.US_ASCII));
        body.put((byte) name.length).put(name).putInt(value.length).put(value);
        return command(body.array());
    }

    /** A command short enough for one byte of length. */
    static byte[] command(byte[] body) {
        byte[] command = new byte[2 + body.length];
        command[0] = COMMAND;
        command[1] = (byte) body.length;
        System.arraycopy(body, 0, command, 2, body.length);
        return command;
    }

    /** Says whether a command has a name, and if so leaves its body behind the name. */
    static boolean isNamed(String name, ByteBuffer command) {
        byte[] wanted = name.getBytes(StandardCharsets.US_ASCII);
        if (command.remaining() <= wanted.length || command.get(command.position()) != wanted.length) {
            return false;
        }
        byte[] found = new byte[wanted.length];
        command.get(command.position() + 1, found);
        if (!Arrays.equals(found, wanted)) {
            return false;
        }
        command.position(command.position() + 1 + wanted.length);
        return true;
    }

    /** Reads the properties of a READY command; their names are case-insensitive and come in lower case. */
    static Map<String, byte[]> properties(ByteBuffer body) throws WireViolation {
        Map<String, byte[]> properties = new HashMap<>();
        while (body.hasRemaining()) {
            byte[] name = bytes(body, body.get() & 0xff);
            if (body.remaining() < Integer.BYTES) {
                throw new WireViolation("its READY command is cut off");
            }
            byte[] value = bytes(body, body.getInt());
            properties.put(new String(name, StandardCharsets.US_ASCII).toLowerCase(Locale.ROOT), value);
        }
        return properties;
    }

    private static byte[] bytes(ByteBuffer body, int length) throws WireViolation {
        if (length < 0 || length > body.remaining()) {
            throw new WireViolation("its READY command is cut off");
        }
        byte[] bytes = new byte[length];
        body.get(bytes);
        return bytes;
    }

    /** Puts the header of each frame in front of it; short frames are copied together, long ones stay as they are. */
    static List<byte[]> message(List<byte[]> frames) {
        List<byte[]> pieces = new ArrayList<>();
        for (int i = 0; i < frames.size(); i++) {
            byte[] frame = frames.get(i);
            int more = i + 1 < frames.size() ? MORE : 0;
            if (frame.length < SHORTEST_LONG) {
                byte[] piece = new byte[2 + frame.length];
                piece[0] = (byte) more;
                piece[1] = (byte) frame.length;
                System.arraycopy(frame, 0, piece, 2, frame.length);
                pieces.add(piece);
            } else {
                pieces.add(ByteBuffer.allocate(9)
                        .put((byte) (more | LONG))
                        .putLong(frame.length)
                        .array());
                pieces.add(frame);
            }
        }
        return pieces;
    }
}
