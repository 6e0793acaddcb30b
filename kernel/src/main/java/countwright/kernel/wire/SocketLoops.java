package countwright.kernel.wire;

import java.util.EnumMap;
import java.util.Map;
import java.util.Optional;
import org.zeromq.ZMQ;

/** The loops of one side's five sockets. */
final class SocketLoops {

    private final Map<Channel, SocketLoop> loops = new EnumMap<>(Channel.class);

    void add(Channel channel, SocketLoop loop) {
        loops.put(channel, loop);
    }

    /** Returns the loop of a channel, which has been added. */
    SocketLoop on(Channel channel) {
        return Optional.ofNullable(loops.get(channel)).orElseThrow();
    }

    /** Sends what is still queued, waiting a second at most, and closes all sockets and what they share. */
    void close(ZMQ.Context context) {
        loops.values().forEach(SocketLoop::close);
        try {
            for (SocketLoop loop : loops.values()) {
                loop.join();
            }
            context.close();
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
    }
}
