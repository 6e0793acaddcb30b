package countwright.kernel.service;

import countwright.kernel.wire.Header;
import countwright.show.CommMessage;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.RejectedExecutionException;
import java.util.concurrent.atomic.AtomicInteger;
import java.util.function.Function;
import tools.jackson.databind.node.ObjectNode;

/**
 * Carries comm messages between front ends and the session, and knows which comms are open. Messages from the front end
 * go to their handlers in the order in which they came, also while a cell runs; the idle of a message is said when its
 * handler has ended. When the worker is lost, all comms are closed. Used by any thread.
 */
final class CommDesk {

    private static final Logger LOG = System.getLogger(CommDesk.class.getName());

    /** Beyond this the handlers do not keep up; what comes then is dropped rather than filling memory. */
    private static final int MOST_UNDER_WAY = 10_000;

    private final EngineGate engine;
    private final Outbox outbox;

    /** One thread, since the engine may have to be waited for and the order must be kept. */
    private final ExecutorService lane = Background.inOrder("countwright-comms");

    private final AtomicInteger underWay = new AtomicInteger();

    /** The target of each open comm by its id. */
    private final Map<String, String> open = new LinkedHashMap<>();

    CommDesk(EngineGate engine, Outbox outbox) {
        this.engine = engine;
        this.outbox = outbox;
        engine.whenStarted(cells -> cells.whenWorkerIsLost(this::closeAll));
    }

    /** Answers {@code comm_info_request}. */
    Handler info() {
        return request -> {
            String wanted = request.content().text("target_name", "");
            ObjectNode reply = Replies.ok();
            ObjectNode comms = reply.putObject("comms");
            synchronized (this) {
                open.forEach((id, target) -> {
                    if (wanted.isEmpty() || wanted.equals(target)) {
                        comms.putObject(id).put("target_name", target);
                    }
                });
            }
            return Optional.of(reply);
        };
    }

    /** Takes {@code comm_open}. */
    void open(Request request) {
        take(request, content -> {
            CommMessage message = new CommMessage(
                    CommMessage.Kind.OPEN,
                    content.text("comm_id"),
                    content.text("target_name"),
                    JsonValues.of(content.object("data")));
            synchronized (this) {
                open.put(message.commId(), message.target());
            }
            return Optional.of(message);
        });
    }

    /** Takes {@code comm_msg}. */
    void message(Request request) {
        take(request, content -> ofOpenComm(CommMessage.Kind.MESSAGE, content));
    }

    /** Takes {@code comm_close}. */
    void close(Request request) {
        take(request, content -> {
            Optional<CommMessage> message = ofOpenComm(CommMessage.Kind.CLOSE, content);
            message.ifPresent(each -> remove(each.commId()));
            return message;
        });
    }

    /** Publishes a message that the session sends, under the request that led to it. */
    void publish(Header cause, CommMessage message) {
        synchronized (this) {
            switch (message.kind()) {
                case OPEN -> open.put(message.commId(), message.target());
                case MESSAGE -> {}
                case CLOSE -> open.remove(message.commId());
            }
        }
        ObjectNode content = Replies.object().put("comm_id", message.commId());
        if (message.kind() == CommMessage.Kind.OPEN) {
            content.put("target_name", message.target());
        }
        content.set("data", JsonValues.toJson(message.data()));
        outbox.publishWhenRoom(type(message.kind()), cause, content);
    }

    /** Takes nothing more. */
    void close() {
        lane.shutdownNow();
    }

    private static String type(CommMessage.Kind kind) {
        return switch (kind) {
            case OPEN -> "comm_open";
            case MESSAGE -> "comm_msg";
            case CLOSE -> "comm_close";
        };
    }

    private Optional<CommMessage> ofOpenComm(CommMessage.Kind kind, Content content) {
        String id = content.text("comm_id");
        synchronized (this) {
            if (!open.containsKey(id)) {
                LOG.log(Level.DEBUG, "Ignored a message to a comm that is not open.");
                return Optional.empty();
            }
        }
        return Optional.of(new CommMessage(kind, id, "", JsonValues.of(content.object("data"))));
    }

    private synchronized void remove(String id) {
        open.remove(id);
    }

    /** These messages have no reply, so what is wrong with one can only be logged. */
    private void take(Request request, Function<Content, Optional<CommMessage>> reading) {
        outbox.busy(request.header());
        Optional<CommMessage> message = Optional.empty();
        try {
            message = reading.apply(request.content());
        } catch (RuntimeException e) {
            // Of any kind: the idle below must come.
            LOG.log(Level.WARNING, "Ignored a message to a comm: " + e.getMessage());
        }
        if (message.isEmpty()) {
            outbox.idle(request.header());
            return;
        }
        CommMessage taken = message.get();
        if (underWay.incrementAndGet() > MOST_UNDER_WAY) {
            LOG.log(Level.WARNING, "Dropped a message to a comm: its handlers do not keep up.");
            if (taken.kind() == CommMessage.Kind.OPEN) {
                publish(request.header(), new CommMessage(CommMessage.Kind.CLOSE, taken.commId(), "", Map.of()));
            }
            handled(request);
            return;
        }
        try {
            lane.execute(() -> passOn(taken, request));
        } catch (RejectedExecutionException shuttingDown) {
            handled(request);
        }
    }

    private void passOn(CommMessage message, Request request) {
        try {
            engine.await().receive(message, new HandlerBroadcast(request, outbox, this), () -> handled(request));
        } catch (EngineGate.NoEngineException e) {
            publish(request.header(), new CommMessage(CommMessage.Kind.CLOSE, message.commId(), "", Map.of()));
            handled(request);
        } catch (InterruptedException e) {
            handled(request);
            Thread.currentThread().interrupt();
        } catch (RuntimeException | Error e) {
            LOG.log(Level.ERROR, "A message to a comm could not be passed on; the next one will be.", e);
            handled(request);
        }
    }

    private void handled(Request request) {
        underWay.decrementAndGet();
        outbox.idle(request.header());
    }

    private void closeAll() {
        List<String> lost;
        synchronized (this) {
            lost = List.copyOf(open.keySet());
            open.clear();
        }
        for (String id : lost) {
            ObjectNode content = Replies.object().put("comm_id", id);
            content.putObject("data");
            outbox.publish("comm_close", content);
        }
    }
}
