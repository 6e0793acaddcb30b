package countwright.kernel.service;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import java.util.Optional;
import tools.jackson.databind.node.ObjectNode;

/** Answers {@code connect_request}: the ports of the five sockets, under the names of the connection file. */
final class ConnectHandler implements Handler {

    private final ConnectionFile connection;

    ConnectHandler(ConnectionFile connection) {
        this.connection = connection;
    }

    @Override
    public Optional<ObjectNode> answer(Request request) {
        ObjectNode reply = Replies.ok();
        for (Channel channel : Channel.values()) {
            reply.put(channel.portField(), connection.ports().get(channel));
        }
        return Optional.of(reply);
    }
}
