package countwright.kernel.service;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.Deliveries;
import countwright.kernel.wire.Envelope;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.util.HashMap;
import java.util.Map;
import java.util.concurrent.Executor;
import java.util.concurrent.RejectedExecutionException;
import java.util.function.Consumer;

/**
 * Gives each request to its handler, in one of three lanes.
 *
 * <p>The protocol orders requests within a channel, but a front end that asks for a completion, or a server that asks
 * for kernel_info, should not wait for a long cell; and replies name their request, so they need no order. Therefore:
 *
 * <ul>
 *   <li>cells run strictly one after the other, see {@link CellLane};
 *   <li>questions about code (complete, inspect, is_complete) are answered one after the other, beside the cells, since
 *       the compiler may take its time;
 *   <li>everything else is answered at once, on the thread that received it.
 * </ul>
 *
 * <p>All types are taken on shell and on control alike. Types not in the table are ignored, with a line in the log: the
 * protocol lets a kernel be silent on what it does not know.
 */
final class Dispatcher implements Deliveries {

    private static final Logger LOG = System.getLogger(Dispatcher.class.getName());

    private final Outbox outbox;
    private final InputDesk inputDesk;
    private final CellLane cells;
    private final Map<String, Lane> lanes = new HashMap<>();

    @FunctionalInterface
    private interface Lane {
        void take(Request request);
    }

    Dispatcher(Outbox outbox, InputDesk inputDesk, CellLane cells) {
        this.outbox = outbox;
        this.inputDesk = inputDesk;
        this.cells = cells;
        lanes.put("execute_request", this.cells::add);
    }

    /** Has a type of request answered at once. */
    Dispatcher atOnce(String type, Handler handler) {
        Handler safe = new SafeAnswer(handler);
        lanes.put(type, request -> answer(request, safe));
        return this;
    }

    /** Has a type of request answered at once, and something done after the answer. */
    Dispatcher atOnce(String type, Handler handler, Consumer<Request> afterwards) {
        Handler safe = new SafeAnswer(handler);
        lanes.put(type, request -> {
            answer(request, safe);
            afterwards.accept(request);
        });
        return this;
    }

    /** Has a type of request answered by an executor. */
    Dispatcher through(Executor executor, String type, Handler handler) {
        Handler safe = new SafeAnswer(handler);
        lanes.put(type, request -> {
            try {
                executor.execute(() -> answer(request, safe));
            } catch (RejectedExecutionException e) {
                LOG.log(Level.DEBUG, "A " + type + " came too late: the kernel is shutting down.");
            }
        });
        return this;
    }

    @Override
    public void deliver(Channel channel, Envelope envelope) {
        if (channel == Channel.STDIN) {
            inputDesk.deliver(envelope);
            return;
        }
        Request request = new Request(channel, envelope);
        Lane lane = lanes.get(request.type());
        if (lane == null) {
            // The type is the peer's text: it is not quoted.
            LOG.log(Level.INFO, "Ignored a message on " + channel.protocolName() + ": its type is not handled here.");
            return;
        }
        lane.take(request);
    }

    private void answer(Request request, Handler handler) {
        outbox.busy(request.header());
        try {
            handler.answer(request).ifPresent(content -> outbox.reply(request, content));
        } finally {
            outbox.idle(request.header());
        }
    }
}
