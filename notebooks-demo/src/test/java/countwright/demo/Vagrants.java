package countwright.demo;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayDeque;
import java.util.Arrays;
import java.util.Deque;
import java.util.List;
import java.util.Random;

/** Clients that connect to any of the five ports, behave badly and vanish; some stay for a while. */
final class Vagrants implements AutoCloseable {

    private static final int MOST_STAYING = 60;

    private final ConnectionFile connection;
    private final Random random;
    private final Deque<RawPeer> staying = new ArrayDeque<>();
    private int count;

    Vagrants(ConnectionFile connection, Random random) {
        this.connection = connection;
        this.random = random;
    }

    /** Returns how many there have been. */
    int count() {
        return count;
    }

    void visit() throws IOException {
        count++;
        Channel[] channels = Channel.values();
        RawPeer peer = new RawPeer(connection.port(channels[random.nextInt(channels.length)]));
        try {
            for (byte[] words : words()) {
                peer.send(words);
            }
        } catch (IOException refused) {
            // The kernel may close the connection as soon as it has seen enough.
            peer.close();
            return;
        }
        switch (random.nextInt(3)) {
            case 0 -> peer.reset();
            case 1 -> peer.close();
            default -> stay(peer);
        }
    }

    private void stay(RawPeer peer) throws IOException {
        staying.add(peer);
        if (staying.size() > MOST_STAYING) {
            staying.remove().reset();
        }
    }

    private List<byte[]> words() throws IOException {
        byte[] greeting = RawPeer.greeting();
        byte[] ready = RawPeer.ready(random.nextBoolean() ? "DEALER" : "SUB", "v");
        return switch (random.nextInt(11)) {
            case 0 -> List.of();
            case 1 -> List.of(noise(1 + random.nextInt(5000)));
            case 2 -> List.of(Arrays.copyOf(greeting, random.nextInt(greeting.length)));
            case 3 -> List.of(greeting);
            case 4 -> List.of(greeting, ready);
            case 5 -> List.of(greeting, noise(1 + random.nextInt(2000)));
            case 6 -> List.of(greeting, ready, noise(1 + random.nextInt(2000)));
            case 7 -> List.of(greeting, ready, RawPeer.headerOnly(oddLength()), noise(200));
            case 8 -> List.of(greeting, RawPeer.frame(4, noise(1 + random.nextInt(300))));
            case 9 -> List.of("GET / HTTP/1.1\r\nHost: localhost\r\n\r\n".getBytes(StandardCharsets.US_ASCII));
            default ->
                List.of(greeting, ready, RawPeer.frame(1, noise(3)), RawPeer.frame(0, noise(random.nextInt(3000))));
        };
    }

    private long oddLength() {
        long[] lengths = {0, 255, 1 << 20, 60 << 20, Integer.MAX_VALUE, 1L << 40, Long.MAX_VALUE, -1, Long.MIN_VALUE};
        return lengths[random.nextInt(lengths.length)];
    }

    private byte[] noise(int length) {
        byte[] noise = new byte[length];
        random.nextBytes(noise);
        return noise;
    }

    @Override
    public void close() throws IOException {
        for (RawPeer peer : staying) {
            peer.close();
        }
    }
}
