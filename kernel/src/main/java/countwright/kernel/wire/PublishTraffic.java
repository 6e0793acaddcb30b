package countwright.kernel.wire;

import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.List;
import java.util.function.BiConsumer;

/** A socket that tells each peer what it has subscribed to (an XPUB in ZeroMQ's words). */
final class PublishTraffic implements Traffic {

    private static final int LONGEST_TOPIC = 1024;
    private static final int MOST_SUBSCRIPTIONS = 100;

    private final OutputRoom room;
    private final BiConsumer<Peer, String> subscribed;

    /** Says which peer has subscribed to which topic. */
    PublishTraffic(OutputRoom room, BiConsumer<Peer, String> subscribed) {
        this.room = room;
        this.subscribed = subscribed;
    }

    @Override
    public String socketType() {
        return "XPUB";
    }

    @Override
    public void joined(Peer peer) {
        // It hears nothing until it has subscribed.
    }

    @Override
    public void left(Peer peer) {
        // Its subscriptions go with it.
    }

    /** A subscription is one frame: 1 for on or 0 for off, then the topic. */
    @Override
    public void received(Peer peer, List<byte[]> frames) throws WireViolation {
        byte[] frame = frames.get(0);
        if (frames.size() > 1 || frame.length == 0 || frame.length > LONGEST_TOPIC || (frame[0] & ~1) != 0) {
            throw new WireViolation("it sent something that is no subscription");
        }
        byte[] topic = Arrays.copyOfRange(frame, 1, frame.length);
        if (frame[0] == 0) {
            unsubscribe(peer, topic);
        } else if (peer.subscriptions().size() >= MOST_SUBSCRIPTIONS) {
            throw new WireViolation("it has more than " + MOST_SUBSCRIPTIONS + " subscriptions");
        } else {
            peer.subscriptions().add(topic);
            subscribed.accept(peer, new String(topic, StandardCharsets.UTF_8));
        }
    }

    @Override
    public void turnEnded(List<Peer> peers) {
        room.behind(peers.stream().mapToLong(Peer::queuedBytes).max().orElse(0));
    }

    private static void unsubscribe(Peer peer, byte[] topic) {
        for (int i = 0; i < peer.subscriptions().size(); i++) {
            if (Arrays.equals(peer.subscriptions().get(i), topic)) {
                peer.subscriptions().remove(i);
                return;
            }
        }
    }
}
