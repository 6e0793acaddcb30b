package countwright.kernel.service;

import java.time.Duration;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.UUID;
import java.util.function.Supplier;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.ObjectNode;

/**
 * The main shell and the subshells: which of them a request belongs to, and the requests that create, delete and list
 * them. A request names its subshell in its header; without a name it is the main shell's.
 *
 * <p>A subshell has lines of its own for cells and for questions, so nothing that waits in another shell holds up its
 * questions, and a failed cell aborts the cells of its own shell only. It has no second compiler: cells of all shells
 * run one at a time, in the one session whose variables they share. Used by any thread.
 */
final class Subshells {

    /** Each has threads of its own; front ends make one or two. */
    private static final int MOST = 64;

    private static final int LONGEST_QUOTED = 60;

    private final Supplier<Shell> newShell;
    private final Shell main;
    private final Map<String, Shell> shells = new LinkedHashMap<>();
    private boolean closed;

    Subshells(Supplier<Shell> newShell) {
        this.newShell = newShell;
        this.main = newShell.get();
    }

    /** Starts the main shell. */
    void start() {
        main.start();
    }

    /**
     * Returns the shell that a request belongs to.
     *
     * @throws BadRequestException if it names a subshell that is not there
     */
    Shell of(Request request) {
        JsonNode id = request.subshell();
        if (id.isMissingNode() || id.isNull()) {
            return main;
        }
        synchronized (this) {
            return Optional.ofNullable(shells.get(id.stringValue("")))
                    .orElseThrow(() -> new BadRequestException("There is no subshell " + quoted(id)
                            + ": it was never created, or it was deleted. Create one with create_subshell_request."));
        }
    }

    /** Answers {@code create_subshell_request}. */
    Handler create() {
        return request -> {
            String id = UUID.randomUUID().toString();
            synchronized (this) {
                if (closed || shells.size() >= MOST) {
                    return Optional.of(Replies.error(
                            "TooManySubshells",
                            "There are " + MOST + " subshells already, which is the most. Delete one first."));
                }
                shells.put(id, newShell.get().start());
            }
            return Optional.of(Replies.ok().put("subshell_id", id));
        };
    }

    /** Answers {@code delete_subshell_request}; cells that wait in the subshell are aborted first. */
    Handler delete() {
        return request -> {
            String id = request.content().text("subshell_id");
            Optional<Shell> deleted;
            synchronized (this) {
                deleted = Optional.ofNullable(shells.remove(id));
            }
            deleted.ifPresent(Shell::close);
            return Optional.of(
                    deleted.isPresent()
                            ? Replies.ok()
                            : Replies.error(
                                    "UnknownSubshell",
                                    "There is no subshell of the id given in content.subshell_id; it may have been deleted before."));
        };
    }

    /** Answers {@code list_subshell_request}. */
    Handler list() {
        return request -> {
            ObjectNode reply = Replies.ok();
            ArrayNode ids = reply.putArray("subshell_id");
            synchronized (this) {
                shells.keySet().forEach(ids::add);
            }
            return Optional.of(reply);
        };
    }

    /** Aborts all cells that wait, in every shell. */
    void close() {
        all().forEach(Shell::close);
    }

    /** Waits, after {@link #close()}, until the running cell has ended, but no longer than given. */
    void awaitEnd(Duration patience) throws InterruptedException {
        long deadline = System.nanoTime() + patience.toNanos();
        for (Shell shell : all()) {
            shell.awaitEnd(Duration.ofNanos(Math.max(0, deadline - System.nanoTime())));
        }
    }

    private synchronized List<Shell> all() {
        closed = true;
        List<Shell> all = new ArrayList<>(shells.values());
        all.add(main);
        return all;
    }

    private static String quoted(JsonNode id) {
        String text = id.isString() ? id.stringValue() : "of such an id";
        return id.isString() ? "'" + text.substring(0, Math.min(text.length(), LONGEST_QUOTED)) + "'" : text;
    }
}
