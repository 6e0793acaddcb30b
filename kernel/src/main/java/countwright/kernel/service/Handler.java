package countwright.kernel.service;

import java.util.Optional;
import tools.jackson.databind.node.ObjectNode;

/**
 * Answers one type of request. It returns the content of the reply instead of sending it, so that whoever calls it can
 * see to it that each request gets exactly one reply, between busy and idle.
 */
@FunctionalInterface
interface Handler {

    /**
     * Returns the content of the reply; empty for the types that have none.
     *
     * @throws BadRequestException if the content of the request is wrong
     */
    Optional<ObjectNode> answer(Request request);
}
