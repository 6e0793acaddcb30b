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
import java.util.function.BiConsumer;
import java.util.function.Consumer;

/**
 * Gives each request to its handler, in one of three lanes of its shell.
 *
 * <p>The protocol orders requests within a channel, but a front end that asks for a completion, or a server that asks
 * for kernel_info, should not wait for a long cell; and replies name their request, so they need no order. Therefore:
 *
 * <ul>
 *   <li>cells run strictly one after the other, see {@link CellLane};
 *   <li>questions about code (complete, inspect, is_complete) are answered one after the other, beside the cells, since
 *       the compiler may take its time;
 *   <li>what may have to wait for a disk has a thread of its own;
 *   <li>everything else is answered at once, on the thread that received it.
 * </ul>
 *
 * <p>All types are taken on shell and on control alike; on shell the header may name a subshell, see {@link Subshells}.
 * Types not in the table are ignored, with a line in the log: the protocol lets a kernel be silent on what it does not
 * know.
 */
final class Dispatcher implements Deliveries {

    private static final Logger LOG = System.getLogger(Dispatcher.class.getName());

    private final Outbox outbox;
    private final InputDesk inputDesk;
    private final Subshells shells;
    private final Map<String, BiConsumer<Shell, Request>> takers = new HashMap<>();

    Dispatcher(Outbox outbox, InputDesk inputDesk, Subshells shells) {
        this.outbox = outbox;
        this.inputDesk = inputDesk;
        this.shells = shells;
        takers.put("execute_request", (shell, request) -> shell.cells().add(request));
    }

    /** Has a type of request answered at once. */
    Dispatcher atOnce(String type, Handler handler) {
        return atOnce(type, handler, request -> {});
    }

    /** Has a type of request answered at once, and something done after the answer. */
    Dispatcher atOnce(String type, Handler handler, Consumer<Request> afterwards) {
        Handler safe = new SafeAnswer(handler);
        takers.put(type, (shell, request) -> {
            answer(request, safe);
            afterwards.accept(request);
        });
        return this;
    }

    /** Has a type of request taken as it is, by something that says busy and idle itself. */
    Dispatcher handingOver(String type, Consumer<Request> taker) {
        takers.put(type, (shell, request) -> taker.accept(request));
        return this;
    }

    /** Has a type of request answered among the questions of its shell. */
    Dispatcher asQuestion(String type, Handler handler) {
        Handler safe = new SafeAnswer(handler);
        takers.put(type, (shell, request) -> answerThrough(shell.questions(), request, safe));
        return this;
    }

    /** Has a type of request answered by an executor. */
    Dispatcher through(Executor executor, String type, Handler handler) {
        Handler safe = new SafeAnswer(handler);
        takers.put(type, (shell, request) -> answerThrough(executor, request, safe));
        return this;
    }

    @Override
    public void deliver(Channel channel, Envelope envelope) {
        if (channel == Channel.STDIN) {
            inputDesk.deliver(envelope);
            return;
        }
        Request request = new Request(channel, envelope);
        BiConsumer<Shell, Request> taker = takers.get(request.type());
        if (taker == null) {
            // The type is the peer's text: it is not quoted.
            LOG.log(Level.INFO, "Ignored a message on " + channel.protocolName() + ": its type is not handled here.");
            return;
        }
        Shell shell;
        try {
            shell = shells.of(request);
        } catch (BadRequestException e) {
            answer(request, new SafeAnswer(unknown -> {
                throw e;
            }));
            return;
        }
        taker.accept(shell, request);
    }

    private void answerThrough(Executor executor, Request request, Handler handler) {
        try {
            executor.execute(() -> answer(request, handler));
        } catch (RejectedExecutionException e) {
            // The kernel is shutting down, or the subshell was deleted at this very moment.
            outbox.busy(request.header());
            outbox.reply(request, Replies.aborted());
            outbox.idle(request.header());
        }
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
