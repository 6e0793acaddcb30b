package countwright.kernel.service;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.Envelope;
import countwright.kernel.wire.Header;
import countwright.kernel.wire.Route;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.MissingNode;

/** A request as it came in on a channel. */
record Request(Channel channel, Envelope envelope) {

    Header header() {
        return envelope.message().header();
    }

    String type() {
        return header().type();
    }

    Route route() {
        return envelope.route();
    }

    Content content() {
        return new Content(type(), envelope.message().content());
    }

    /** Returns what the header says about the subshell; missing for the main shell. Only shell has subshells. */
    JsonNode subshell() {
        return channel == Channel.SHELL ? header().subshell() : MissingNode.getInstance();
    }

    String replyType() {
        String type = type();
        return type.substring(0, type.length() - "request".length()) + "reply";
    }
}
