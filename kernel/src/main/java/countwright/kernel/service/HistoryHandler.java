package countwright.kernel.service;

import java.util.ArrayList;
import java.util.Collections;
import java.util.HashSet;
import java.util.List;
import java.util.Optional;
import java.util.OptionalInt;
import java.util.Set;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.ObjectNode;

/**
 * Answers {@code history_request}. Code is kept as it was run and nothing is rewritten before it runs, so the request's
 * {@code raw} makes no difference.
 */
final class HistoryHandler implements Handler {

    private static final int LONGEST_PATTERN = 10_000;

    private final History history;

    HistoryHandler(History history) {
        this.history = history;
    }

    @Override
    public Optional<ObjectNode> answer(Request request) {
        Content content = request.content();
        String access = content.text("hist_access_type", "tail");
        List<HistoryEntry> found = switch (access) {
            case "tail" -> last(history.all(), content.integer("n"));
            case "range" -> range(content);
            case "search" -> search(content);
            default ->
                throw new BadRequestException(
                        "history_request needs tail, range or search in content.hist_access_type, but it is '" + access
                                + "'. The front end should be corrected.");
        };
        boolean withOutput = content.flag("output", false);
        ObjectNode reply = Replies.ok();
        ArrayNode list = reply.putArray("history");
        for (HistoryEntry entry : found) {
            ArrayNode item = list.addArray().add(entry.session()).add(entry.line());
            if (withOutput) {
                ArrayNode pair = item.addArray().add(entry.input());
                entry.output().ifPresentOrElse(pair::add, pair::addNull);
            } else {
                item.add(entry.input());
            }
        }
        return Optional.of(reply);
    }

    /** The stop is exclusive. */
    private List<HistoryEntry> range(Content content) {
        int start = content.integer("start").orElse(0);
        int stop = content.integer("stop").orElse(Integer.MAX_VALUE);
        return history.ofSession(content.integer("session").orElse(0)).stream()
                .filter(entry -> entry.line() >= start && entry.line() < stop)
                .toList();
    }

    private List<HistoryEntry> search(Content content) {
        String pattern = content.text("pattern", "*");
        if (pattern.length() > LONGEST_PATTERN) {
            throw new BadRequestException("history_request needs at most " + LONGEST_PATTERN
                    + " characters in content.pattern, but there are " + pattern.length() + ".");
        }
        Glob glob = Glob.of(pattern);
        List<HistoryEntry> found = history.all().stream()
                .filter(entry -> glob.matches(entry.input()))
                .toList();
        return last(content.flag("unique", false) ? latestOfEach(found) : found, content.integer("n"));
    }

    private static List<HistoryEntry> last(List<HistoryEntry> found, OptionalInt n) {
        int count = Math.min(found.size(), Math.max(0, n.orElse(found.size())));
        return found.subList(found.size() - count, found.size());
    }

    private static List<HistoryEntry> latestOfEach(List<HistoryEntry> found) {
        List<HistoryEntry> latest = new ArrayList<>();
        Set<String> seen = new HashSet<>();
        for (int i = found.size() - 1; i >= 0; i--) {
            if (seen.add(found.get(i).input())) {
                latest.add(found.get(i));
            }
        }
        Collections.reverse(latest);
        return latest;
    }
}
