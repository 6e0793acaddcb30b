package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ClientSockets;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Message;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import java.util.concurrent.TimeUnit;
import java.util.function.Predicate;
import tools.jackson.databind.json.JsonMapper;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/** A front end that keeps everything it hears and can wait, with a limit, for what it wants to hear. */
final class FrontEnd implements AutoCloseable {

    private static final long LIMIT_SECONDS = 60;

    private final List<Heard> heard = new ArrayList<>();
    private final List<Heard> sent = new ArrayList<>();
    private final Set<String> answered = new HashSet<>();
    private final ClientSockets sockets;

    record Heard(Channel channel, Message message) {}

    FrontEnd(ConnectionFile connection) throws Exception {
        sockets = ClientSockets.connect(connection, "tester", (channel, envelope) -> {
            synchronized (heard) {
                heard.add(new Heard(channel, envelope.message()));
                heard.notifyAll();
            }
        });
        sockets.subscribed().get(LIMIT_SECONDS, TimeUnit.SECONDS);
    }

    /** Sends a request whose content is given as JSON with single quotes. */
    Message send(Channel channel, String type, String content) {
        Message request = sockets.request(type, json(content));
        send(channel, request);
        return request;
    }

    /** Sends a request to a subshell. */
    Message sendTo(String subshell, String type, String content) {
        Message request = sockets.request(subshell, type, json(content));
        send(Channel.SHELL, request);
        return request;
    }

    Message execute(String code) {
        return execute(code, "{}");
    }

    Message execute(String code, String options) {
        ObjectNode content = json(options).put("code", code);
        Message request = sockets.request("execute_request", content);
        send(Channel.SHELL, request);
        return request;
    }

    void answer(Message question, String value) {
        ObjectNode content = JsonNodeFactory.instance.objectNode().put("value", value);
        send(Channel.STDIN, sockets.answer("input_reply", question, content));
    }

    void answerWithoutParent(String value) {
        ObjectNode content = JsonNodeFactory.instance.objectNode().put("value", value);
        send(Channel.STDIN, sockets.request("input_reply", content));
    }

    private void send(Channel channel, Message message) {
        synchronized (heard) {
            sent.add(new Heard(channel, message));
        }
        sockets.send(channel, message);
    }

    /** Returns all that was sent or heard so far. */
    List<Heard> all() {
        synchronized (heard) {
            List<Heard> all = new ArrayList<>(sent);
            all.addAll(heard);
            return all;
        }
    }

    /** Waits for the next question of a cell that has not been waited for. */
    Message awaitQuestion(Message cell) throws InterruptedException {
        Message question = await(
                "a question",
                item -> item.channel() == Channel.STDIN
                        && item.message().isCausedBy(cell.header())
                        && !answered.contains(item.message().header().id()));
        answered.add(question.header().id());
        return question;
    }

    Message await(Channel channel, String type, Message cause) throws InterruptedException {
        return await(
                type,
                item -> item.channel() == channel
                        && item.message().type().equals(type)
                        && item.message().isCausedBy(cause.header()));
    }

    /** Waits for a message about a comm, whatever its cause. */
    void awaitPublished(String type, String commId) throws InterruptedException {
        await(
                type + " of " + commId,
                item -> item.message().type().equals(type)
                        && item.message()
                                .content()
                                .path("comm_id")
                                .stringValue("")
                                .equals(commId));
    }

    /** Waits for the reply and for idle, so that everything about the request has been heard. */
    Message reply(Message request) throws InterruptedException {
        awaitIdle(request);
        return await(
                "a reply to " + request.type(),
                item -> (item.channel() == Channel.SHELL || item.channel() == Channel.CONTROL)
                        && item.message().isCausedBy(request.header()));
    }

    void awaitIdle(Message request) throws InterruptedException {
        await(
                "idle after " + request.type(),
                item -> item.message().type().equals("status")
                        && item.message().isCausedBy(request.header())
                        && state(item.message()).equals("idle"));
    }

    /** Returns what was heard so far about a request on a channel. */
    List<Message> about(Message request, Channel channel) {
        synchronized (heard) {
            return heard.stream()
                    .filter(item -> item.channel() == channel && item.message().isCausedBy(request.header()))
                    .map(Heard::message)
                    .toList();
        }
    }

    List<String> publishedTypes(Message request) {
        return about(request, Channel.IOPUB).stream().map(Message::type).toList();
    }

    static String state(Message status) {
        return status.content().path("execution_state").stringValue("");
    }

    static ObjectNode json(String text) {
        return (ObjectNode) JsonMapper.shared().readTree(text.replace('\'', '"'));
    }

    private Message await(String what, Predicate<Heard> wanted) throws InterruptedException {
        long deadline = System.nanoTime() + TimeUnit.SECONDS.toNanos(LIMIT_SECONDS);
        synchronized (heard) {
            while (true) {
                for (Heard item : heard) {
                    if (wanted.test(item)) {
                        return item.message();
                    }
                }
                long left = TimeUnit.NANOSECONDS.toMillis(deadline - System.nanoTime());
                assertThat(left)
                        .as("time left to hear " + what + " among " + heard)
                        .isPositive();
                heard.wait(left);
            }
        }
    }

    @Override
    public void close() {
        sockets.close();
    }
}
