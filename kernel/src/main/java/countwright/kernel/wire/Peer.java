package countwright.kernel.wire;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.SelectionKey;
import java.nio.channels.SocketChannel;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Deque;
import java.util.List;
import java.util.Map;

/** One connection of a front end: handshake, what it sends, what is queued for it. Used by its loop's thread only. */
final class Peer {

    /** What the loop makes of a peer's words. */
    interface Host {
        void joined(Peer peer) throws WireViolation;

        void received(Peer peer, List<byte[]> frames) throws WireViolation;

        void skipped(String reason);
    }

    private static final int LONGEST_IDENTITY = 255;

    /** Written in one go before others get their turn. */
    private static final int TURN_BYTES = 1 << 20;

    /** Less is not reading: a peer that takes a byte now and then would hold up all output. */
    private static final int PROGRESS_BYTES = 512 << 10;

    /** What a queued piece costs in memory besides its bytes: many short ones must not come cheap. */
    private static final int PIECE_OVERHEAD = 100;

    private final SocketChannel channel;
    private final SelectionKey key;
    private final String socketType;
    private final Host host;
    private final FrameDecoder decoder;
    private final byte[] greeting = new byte[Zmtp.GREETING_BYTES];
    private final Deque<ByteBuffer> queue = new ArrayDeque<>();
    private final List<byte[]> subscriptions = new ArrayList<>();
    private final long since = System.nanoTime();
    private int greetingLength;
    private long queuedBytes;
    private long lastProgress = since;
    private long takenSince;
    private byte[] identity = {};
    private boolean joined;
    private boolean authentic;
    private boolean awaitingRoom;
    private boolean deaf;
    private boolean closed;

    Peer(SocketChannel channel, SelectionKey key, String socketType, WireLimits limits, Host host) {
        this.channel = channel;
        this.key = key;
        this.socketType = socketType;
        this.host = host;
        this.decoder = new FrameDecoder(limits, new FrameDecoder.Receiver() {
            @Override
            public void message(List<byte[]> frames) throws WireViolation {
                if (!joined) {
                    throw new WireViolation("it sent a message before it had introduced itself");
                }
                host.received(Peer.this, frames);
            }

            @Override
            public void command(byte[] body) throws WireViolation {
                take(ByteBuffer.wrap(body));
            }

            @Override
            public void skipped(String reason) {
                host.skipped(reason);
            }
        });
    }

    byte[] identity() {
        return identity;
    }

    void setIdentity(byte[] given) {
        identity = given;
    }

    /** Returns whether the handshake is over. */
    boolean hasJoined() {
        return joined;
    }

    /** Returns whether this peer has shown that it holds the key. */
    boolean isAuthentic() {
        return authentic;
    }

    void setAuthentic() {
        authentic = true;
    }

    boolean isClosed() {
        return closed;
    }

    /** Returns the topics it wants to hear. */
    List<byte[]> subscriptions() {
        return subscriptions;
    }

    /** Returns whether the system takes no more for it until the selector says so. */
    boolean isAwaitingRoom() {
        return awaitingRoom;
    }

    /** Returns whether it takes nothing any more, though requests it has sent may still be unread. */
    boolean isDeaf() {
        return deaf;
    }

    /** Drops what is queued, now and in future; reading goes on. */
    void setDeaf() {
        deaf = true;
        queue.clear();
        queuedBytes = 0;
        updateInterest();
    }

    /** Returns the memory of what is still to be written to it, in bytes; 0 if that is nothing. */
    long queuedBytes() {
        return queuedBytes;
    }

    /** Returns the bytes of an incomplete message. */
    long heldBytes() {
        return decoder.held();
    }

    /** Returns when the connection was made, in nanoseconds of {@link System#nanoTime}. */
    long since() {
        return since;
    }

    /** Returns when it had last taken a fair amount, or all there was. */
    long lastProgress() {
        return lastProgress;
    }

    /** Takes bytes that have arrived. */
    void feed(ByteBuffer in) throws WireViolation {
        while (greetingLength < greeting.length && in.hasRemaining()) {
            int count = Math.min(in.remaining(), greeting.length - greetingLength);
            in.get(greeting, greetingLength, count);
            greetingLength += count;
            Zmtp.checkGreeting(greeting, greetingLength);
            if (greetingLength == greeting.length) {
                queue(List.of(Zmtp.ready(socketType)));
            }
        }
        decoder.feed(in);
    }

    private void take(ByteBuffer command) throws WireViolation {
        if (!joined) {
            if (!Zmtp.isNamed("READY", command)) {
                throw new WireViolation("it did not introduce itself");
            }
            Map<String, byte[]> properties = Zmtp.properties(command);
            byte[] named = properties.getOrDefault("identity", identity);
            if (named.length > LONGEST_IDENTITY) {
                throw new WireViolation("its identity is longer than " + LONGEST_IDENTITY + " bytes");
            }
            identity = named;
            joined = true;
            host.joined(this);
        } else if (Zmtp.isNamed("PING", command) && command.remaining() >= 2 && command.remaining() <= 18) {
            byte[] pong = new byte[5 + command.remaining() - 2];
            pong[0] = 4;
            System.arraycopy(new byte[] {'P', 'O', 'N', 'G'}, 0, pong, 1, 4);
            command.get(command.position() + 2, pong, 5, pong.length - 5);
            queue(List.of(Zmtp.command(pong)));
        } else if (Zmtp.isNamed("SUBSCRIBE", command)) {
            host.received(this, List.of(subscription(1, command)));
        } else if (Zmtp.isNamed("CANCEL", command)) {
            host.received(this, List.of(subscription(0, command)));
        }
    }

    private static byte[] subscription(int on, ByteBuffer topic) {
        byte[] message = new byte[1 + topic.remaining()];
        message[0] = (byte) on;
        topic.get(message, 1, topic.remaining());
        return message;
    }

    /** Says whether it wants messages of a topic. */
    boolean wants(byte[] topic) {
        if (deaf) {
            return false;
        }
        for (byte[] prefix : subscriptions) {
            if (prefix.length <= topic.length && Arrays.equals(prefix, 0, prefix.length, topic, 0, prefix.length)) {
                return true;
            }
        }
        return false;
    }

    /** Queues bytes; they are kept, not copied. Call {@link #flush} soon. */
    void queue(List<byte[]> pieces) {
        if (deaf) {
            return;
        }
        if (queuedBytes == 0) {
            lastProgress = System.nanoTime();
        }
        for (byte[] piece : pieces) {
            queue.add(ByteBuffer.wrap(piece));
            queuedBytes += piece.length + PIECE_OVERHEAD;
        }
    }

    /** Writes what the system takes now, by way of a direct buffer lent for the call. */
    void flush(ByteBuffer scratch) throws IOException {
        int turn = 0;
        while (queuedBytes > 0 && turn < TURN_BYTES) {
            scratch.clear();
            for (ByteBuffer piece : queue) {
                int count = Math.min(piece.remaining(), scratch.remaining());
                scratch.put(scratch.position(), piece, piece.position(), count);
                scratch.position(scratch.position() + count);
                if (!scratch.hasRemaining()) {
                    break;
                }
            }
            scratch.flip();
            int offered = scratch.remaining();
            int written = channel.write(scratch);
            turn += written;
            forget(written);
            if (written < offered) {
                break;
            }
        }
        updateInterest();
    }

    private void updateInterest() {
        awaitingRoom = queuedBytes > 0;
        if (key.isValid()) {
            key.interestOps(awaitingRoom ? SelectionKey.OP_READ | SelectionKey.OP_WRITE : SelectionKey.OP_READ);
        }
    }

    private void forget(int written) {
        queuedBytes -= written;
        takenSince += written;
        int left = written;
        for (ByteBuffer piece = queue.peek(); piece != null && left >= piece.remaining(); piece = queue.peek()) {
            left -= piece.remaining();
            queuedBytes -= PIECE_OVERHEAD;
            queue.remove();
        }
        if (left > 0) {
            ByteBuffer piece = queue.element();
            piece.position(piece.position() + left);
        }
        if (takenSince >= PROGRESS_BYTES || queuedBytes == 0) {
            takenSince = 0;
            lastProgress = System.nanoTime();
        }
    }

    /** Reads what is there into a buffer, flipped; returns false at the end of the stream. */
    boolean read(ByteBuffer buffer) throws IOException {
        buffer.clear();
        int count = channel.read(buffer);
        buffer.flip();
        return count >= 0;
    }

    /** Lets what has been written arrive: a connection closed with unread input would be reset and lose it. */
    void finish(ByteBuffer buffer) throws IOException {
        channel.shutdownOutput();
        for (int reads = 0; reads < 64 && read(buffer) && buffer.hasRemaining(); reads++) {
            // What arrives now is of no interest any more.
        }
    }

    void close() {
        closed = true;
        queue.clear();
        queuedBytes = 0;
        key.cancel();
        try {
            channel.close();
        } catch (IOException e) {
            // Nothing is left to do for it.
        }
    }
}
