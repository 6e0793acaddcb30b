package countwright.kernel.wire;

import java.util.List;

/** What one of the kernel's sockets does with its peers. Called by the socket's own thread only. */
interface Traffic {

    /** Returns the type that the socket gives itself in the handshake. */
    String socketType();

    /** Takes in a peer that has introduced itself. */
    void joined(Peer peer) throws WireViolation;

    /** Forgets a peer that is gone. */
    void left(Peer peer);

    /** Takes a message of a peer that has joined. */
    void received(Peer peer, List<byte[]> frames) throws WireViolation;

    /** Looks at all peers after something was read or written. */
    default void turnEnded(List<Peer> peers) {}
}
