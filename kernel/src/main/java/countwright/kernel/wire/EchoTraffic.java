package countwright.kernel.wire;

import java.util.List;
import java.util.function.BiConsumer;

/** The heartbeat: what a peer sends comes back. */
final class EchoTraffic implements Traffic {

    private final BiConsumer<Peer, List<byte[]>> sender;

    EchoTraffic(BiConsumer<Peer, List<byte[]>> sender) {
        this.sender = sender;
    }

    @Override
    public String socketType() {
        return "ROUTER";
    }

    @Override
    public void joined(Peer peer) {
        // Nothing is sent unasked.
    }

    @Override
    public void left(Peer peer) {
        // Nothing is kept of it.
    }

    @Override
    public void received(Peer peer, List<byte[]> frames) {
        sender.accept(peer, frames);
    }
}
