package countwright.show;

import java.util.Map;
import java.util.Optional;
import java.util.UUID;
import java.util.concurrent.ConcurrentHashMap;
import java.util.function.Consumer;

/**
 * The comms of this session: lines to things in the front end.
 *
 * <pre>{@code
 * Comms.onOpen("depot-picker", comm -> comm.onMessage(data -> comm.send(Map.of("rate", rateOf(data)))));
 * Comm lamp = Comms.open("signal-lamp", Map.of("colour", "green"));
 * }</pre>
 *
 * <p>They end with the worker that runs the cells. Safe to call from any thread.
 */
public final class Comms {

    private static final Map<String, Consumer<Comm>> TARGETS = new ConcurrentHashMap<>();
    private static final Map<String, Comm> OPEN = new ConcurrentHashMap<>();

    private Comms() {}

    /**
     * Says what to do when the front end opens a comm for a target, in place of what was said before. The handler sets
     * the comm's own handlers; if it fails, the comm is closed.
     */
    public static void onOpen(String target, Consumer<Comm> opened) {
        TARGETS.put(target, opened);
    }

    /** Opens a comm for a target of the front end, which closes it if it knows no such target. */
    public static Comm open(String target, Map<String, ?> data) {
        return open(target, data, comm -> {});
    }

    /** Opens a comm whose handlers are set before the other end can send anything. */
    public static Comm open(String target, Map<String, ?> data, Consumer<Comm> setUp) {
        Map<String, Object> copy = CommData.copyOf(data);
        Comm comm = new Comm(UUID.randomUUID().toString(), target, copy);
        setUp.accept(comm);
        OPEN.put(comm.id(), comm);
        try {
            Show.stage().send(new CommMessage(CommMessage.Kind.OPEN, comm.id(), target, copy));
        } catch (IllegalStateException nobodyThere) {
            forget(comm);
            throw nobodyThere;
        }
        return comm;
    }

    /** Takes a message from the front end and runs its handler to the end; for the host of a session. */
    public static void receive(CommMessage message) {
        switch (message.kind()) {
            case OPEN -> opened(message);
            case MESSAGE -> find(message).ifPresent(comm -> comm.received(message.data()));
            case CLOSE ->
                find(message).ifPresent(comm -> {
                    forget(comm);
                    comm.closedByOtherEnd(message.data());
                });
        }
    }

    static void forget(Comm comm) {
        OPEN.remove(comm.id());
    }

    private static void opened(CommMessage message) {
        Comm comm = new Comm(message.commId(), message.target(), message.data());
        Optional<Consumer<Comm>> handler = Optional.ofNullable(TARGETS.get(message.target()));
        OPEN.put(comm.id(), comm);
        boolean done = false;
        try {
            handler.ifPresent(each -> each.accept(comm));
            done = handler.isPresent();
        } finally {
            if (!done) {
                // As the protocol asks for a target that nobody knows; and a comm that was half set up is of no use.
                comm.close();
            }
        }
    }

    private static Optional<Comm> find(CommMessage message) {
        return Optional.ofNullable(OPEN.get(message.commId()));
    }
}
