package countwright.kernel.wire;

import java.nio.ByteBuffer;
import java.security.SecureRandom;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.function.Predicate;

/**
 * A socket that takes requests and sends each reply to the peer with the requester's identity (a ROUTER in ZeroMQ's
 * words).
 *
 * <p>Anyone who reaches the port can claim any identity, and a front end that reconnects claims its old one. So of
 * several peers with one identity the one that last showed it holds the key is meant; before any has, the newest.
 */
final class RequestTraffic implements Traffic {

    private final Predicate<List<byte[]>> receiver;
    private final Map<ByteBuffer, Deque<Peer>> peers = new HashMap<>();

    /** Each socket begins somewhere else, so that an answer on one is not taken for the same front end's on another. */
    private int unnamed = new SecureRandom().nextInt();

    /** Passes on frames with the identity in front; the receiver says whether they were a message that bears the key. */
    RequestTraffic(Predicate<List<byte[]>> receiver) {
        this.receiver = receiver;
    }

    @Override
    public String socketType() {
        return "ROUTER";
    }

    @Override
    public void joined(Peer peer) {
        if (peer.identity().length == 0) {
            // Names that begin with zero are not open to peers.
            peer.setIdentity(
                    ByteBuffer.allocate(5).put((byte) 0).putInt(unnamed).array());
            unnamed++;
        } else if (peer.identity()[0] == 0) {
            peer.setIdentity(prefixed(peer.identity()));
        }
        Deque<Peer> namesakes = peers.computeIfAbsent(key(peer), unused -> new ArrayDeque<>());
        if (namesakes.stream().noneMatch(Peer::isAuthentic)) {
            namesakes.addFirst(peer);
        } else {
            namesakes.addLast(peer);
        }
    }

    private static byte[] prefixed(byte[] identity) {
        return ByteBuffer.allocate(identity.length + 1)
                .put((byte) 1)
                .put(identity)
                .array();
    }

    @Override
    public void left(Peer peer) {
        Deque<Peer> namesakes = peers.get(key(peer));
        if (namesakes != null && namesakes.remove(peer) && namesakes.isEmpty()) {
            peers.remove(key(peer));
        }
    }

    @Override
    public void received(Peer peer, List<byte[]> frames) {
        Deque<Peer> namesakes = peers.get(key(peer));
        List<byte[]> routed = new ArrayList<>(frames.size() + 1);
        routed.add(peer.identity());
        routed.addAll(frames);
        if (receiver.test(routed)) {
            peer.setAuthentic();
            if (namesakes != null && namesakes.peekFirst() != peer) {
                namesakes.remove(peer);
                namesakes.addFirst(peer);
            }
        }
    }

    /** Returns the peer that a route leads to. */
    Optional<Peer> find(byte[] identity) {
        return Optional.ofNullable(peers.get(ByteBuffer.wrap(identity)))
                .flatMap(namesakes ->
                        namesakes.stream().filter(peer -> !peer.isDeaf()).findFirst());
    }

    private static ByteBuffer key(Peer peer) {
        return ByteBuffer.wrap(peer.identity());
    }
}
