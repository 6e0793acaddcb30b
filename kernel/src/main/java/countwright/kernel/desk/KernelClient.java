package countwright.kernel.desk;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ClientSockets;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Message;
import java.time.Duration;
import java.util.Optional;
import java.util.OptionalInt;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/** Talks to one kernel, one request at a time, as a front end would. */
final class KernelClient implements AutoCloseable {

    private static final String USERNAME = "countwright";
    private static final long LOOK_AGAIN_MILLIS = 200;

    private record Arrival(Channel channel, Message message) {}

    private final LinkedBlockingQueue<Arrival> arrivals = new LinkedBlockingQueue<>();
    private final KernelProcess kernel;
    private final ClientSockets sockets;
    private final RunLog log = new RunLog();

    KernelClient(ConnectionFile connection, KernelProcess kernel) {
        this.kernel = kernel;
        this.sockets = ClientSockets.connect(
                connection, USERNAME, (channel, envelope) -> arrivals.add(new Arrival(channel, envelope.message())));
    }

    /**
     * Waits until the kernel answers on shell and its output can be heard, and returns its {@code kernel_info_reply}.
     *
     * @throws DeskException if it ends, or does not answer in time
     */
    ObjectNode ready(Duration limit) {
        long deadline = System.nanoTime() + limit.toNanos();
        Message request = sockets.request("kernel_info_request", JsonNodeFactory.instance.objectNode());
        sockets.send(Channel.SHELL, request);
        Optional<ObjectNode> reply = Optional.empty();
        while (reply.isEmpty() || !sockets.subscribed().isDone()) {
            if (!kernel.isAlive()) {
                throw new DeskException("the kernel ended before it was ready. " + kernel.lastWords());
            }
            if (System.nanoTime() > deadline) {
                throw new DeskException(
                        "the kernel did not answer within " + HtmlReport.seconds(limit) + ". " + kernel.lastWords());
            }
            Optional<Arrival> arrival = next();
            if (arrival.isPresent() && answers(arrival.get(), Channel.SHELL, request)) {
                reply = arrival.map(answer -> answer.message().content());
            }
        }
        return reply.get();
    }

    /**
     * Runs code to its end and returns what came of it.
     *
     * @throws KernelLostException if the kernel ends meanwhile
     */
    RunLog.CellLog execute(String code) throws KernelLostException {
        ObjectNode content = JsonNodeFactory.instance.objectNode();
        content.put("code", code);
        content.put("silent", false);
        content.put("store_history", true);
        content.putObject("user_expressions");
        content.put("allow_stdin", false);
        content.put("stop_on_error", true);
        Message request = sockets.request("execute_request", content);
        RunLog.CellLog cell = log.open(request.header().id());
        sockets.send(Channel.SHELL, request);
        Optional<ObjectNode> reply = Optional.empty();
        boolean idle = false;
        while (reply.isEmpty() || !idle) {
            // Asked before the queue is looked at, so that what a dying kernel sent last is still taken.
            boolean alive = kernel.isAlive();
            Optional<Arrival> arrival = next();
            if (arrival.isEmpty() && !alive) {
                throw new KernelLostException(cell, kernel.lastWords());
            }
            if (arrival.isPresent()) {
                Message message = arrival.get().message();
                if (arrival.get().channel() == Channel.IOPUB) {
                    log.take(message);
                    idle |= message.isCausedBy(request.header()) && isIdle(message);
                } else if (answers(arrival.get(), Channel.SHELL, request)) {
                    reply = Optional.of(message.content());
                }
            }
        }
        settle(cell, reply.get());
        return cell;
    }

    boolean isAlive() {
        return kernel.isAlive();
    }

    /** Asks the kernel to end and waits a while for it; the process is killed by its owner if it does not. */
    void shutDown(Duration patience) {
        ObjectNode content = JsonNodeFactory.instance.objectNode();
        content.put("restart", false);
        sockets.send(Channel.CONTROL, sockets.request("shutdown_request", content));
        kernel.endsWithin(patience);
    }

    @Override
    public void close() {
        sockets.close();
    }

    /** The reply is the last word on whether a cell failed, should a kernel not have published its error. */
    private static void settle(RunLog.CellLog cell, JsonNode reply) {
        JsonNode count = reply.path("execution_count");
        cell.expect(count.isIntegralNumber() ? OptionalInt.of(count.intValue()) : OptionalInt.empty());
        if (!reply.path("status").asString("").equals("ok") && cell.failure().isEmpty()) {
            cell.fail(RunLog.failed(reply));
        }
    }

    private static boolean isIdle(Message message) {
        return message.type().equals("status")
                && message.content().path("execution_state").asString("").equals("idle");
    }

    private static boolean answers(Arrival arrival, Channel channel, Message request) {
        return arrival.channel() == channel
                && arrival.message().type().endsWith("_reply")
                && arrival.message().isCausedBy(request.header());
    }

    private Optional<Arrival> next() {
        try {
            return Optional.ofNullable(arrivals.poll(LOOK_AGAIN_MILLIS, TimeUnit.MILLISECONDS));
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new DeskException("the run was interrupted.", e);
        }
    }
}
