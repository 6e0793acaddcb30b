package countwright.demo;

import java.io.ByteArrayOutputStream;
import java.io.Closeable;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.EOFException;
import java.io.IOException;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.net.Socket;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;

/** A connection to one of the kernel's ports that can send any bytes at all; speaks ZMTP 3.0 where asked to. */
final class RawPeer implements Closeable {

    private static final int TIMEOUT_MILLIS = 20_000;
    private static final int SMALL_BUFFER = 16 << 10;
    private static final int MORE = 1;
    private static final int LONG = 2;
    private static final int COMMAND = 4;

    private final Socket socket;
    private final DataOutputStream out;
    private final DataInputStream in;

    RawPeer(int port) throws IOException {
        socket = new Socket();
        socket.setReceiveBufferSize(SMALL_BUFFER);
        socket.setSoTimeout(TIMEOUT_MILLIS);
        socket.setTcpNoDelay(true);
        socket.connect(new InetSocketAddress(InetAddress.getLoopbackAddress(), port), TIMEOUT_MILLIS);
        out = new DataOutputStream(socket.getOutputStream());
        in = new DataInputStream(socket.getInputStream());
    }

    /** Connects and introduces itself. */
    static RawPeer joined(int port, String socketType, String identity) throws IOException {
        RawPeer peer = new RawPeer(port);
        peer.send(greeting());
        peer.send(ready(socketType, identity));
        return peer;
    }

    static byte[] greeting() {
        byte[] greeting = new byte[64];
        greeting[0] = (byte) 0xff;
        greeting[9] = 0x7f;
        greeting[10] = 3;
        System.arraycopy("NULL".getBytes(StandardCharsets.US_ASCII), 0, greeting, 12, 4);
        return greeting;
    }

    static byte[] ready(String socketType, String identity) throws IOException {
        ByteArrayOutputStream body = new ByteArrayOutputStream();
        DataOutputStream fields = new DataOutputStream(body);
        fields.writeByte(5);
        fields.writeBytes("READY");
        property(fields, "Socket-Type", socketType);
        property(fields, "Identity", identity);
        return frame(COMMAND, body.toByteArray());
    }

    private static void property(DataOutputStream fields, String name, String value) throws IOException {
        fields.writeByte(name.length());
        fields.writeBytes(name);
        fields.writeInt(value.length());
        fields.writeBytes(value);
    }

    /** The bytes of a frame with given flags; the length flag is set as it must be. */
    static byte[] frame(int flags, byte[] body) throws IOException {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        DataOutputStream fields = new DataOutputStream(bytes);
        if (body.length < 256) {
            fields.writeByte(flags);
            fields.writeByte(body.length);
        } else {
            fields.writeByte(flags | LONG);
            fields.writeLong(body.length);
        }
        fields.write(body);
        return bytes.toByteArray();
    }

    /** The header of a frame of any length, whose body is then not sent. */
    static byte[] headerOnly(long length) throws IOException {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        DataOutputStream fields = new DataOutputStream(bytes);
        fields.writeByte(LONG);
        fields.writeLong(length);
        return bytes.toByteArray();
    }

    void send(byte[] bytes) throws IOException {
        out.write(bytes);
        out.flush();
    }

    void sendMessage(List<byte[]> frames) throws IOException {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        for (int i = 0; i < frames.size(); i++) {
            bytes.write(frame(i + 1 < frames.size() ? MORE : 0, frames.get(i)));
        }
        send(bytes.toByteArray());
    }

    /** Returns once everything sent so far has been looked at. */
    void ping() throws IOException {
        send(frame(COMMAND, new byte[] {4, 'P', 'I', 'N', 'G', 0, 0, 'x'}));
        while (true) {
            int flags = in.readUnsignedByte();
            long length = (flags & LONG) == 0 ? in.readUnsignedByte() : in.readLong();
            byte[] body = new byte[(int) length];
            in.readFully(body);
            if ((flags & COMMAND) != 0 && new String(body, StandardCharsets.US_ASCII).equals("\u0004PONGx")) {
                return;
            }
        }
    }

    /** Reads the greeting of the other side, which comes before everything else. */
    RawPeer readGreeting() throws IOException {
        in.readFully(new byte[64]);
        return this;
    }

    /** Waits for the next message; commands are passed over. */
    List<byte[]> receive() throws IOException {
        List<byte[]> frames = new ArrayList<>();
        while (true) {
            int flags = in.readUnsignedByte();
            long length = (flags & LONG) == 0 ? in.readUnsignedByte() : in.readLong();
            byte[] body = new byte[(int) length];
            in.readFully(body);
            if ((flags & COMMAND) == 0) {
                frames.add(body);
                if ((flags & MORE) == 0) {
                    return frames;
                }
            }
        }
    }

    /** Waits until the other side has ended the connection; fails if it does not. */
    void awaitEnd() throws IOException {
        try {
            while (true) {
                in.readByte();
            }
        } catch (EOFException end) {
            return;
        }
    }

    /** Vanishes: with a reset, as a process that is killed with bytes unread does. */
    void reset() throws IOException {
        socket.setSoLinger(true, 0);
        socket.close();
    }

    @Override
    public void close() throws IOException {
        socket.close();
    }
}
