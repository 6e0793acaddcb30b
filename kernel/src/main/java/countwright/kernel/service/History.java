package countwright.kernel.service;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Collections;
import java.util.Deque;
import java.util.HashSet;
import java.util.List;
import java.util.Optional;
import java.util.OptionalInt;
import java.util.Set;
import java.util.regex.Pattern;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.ObjectNode;

/**
 * The cells run in this session and their text results, kept in memory; the oldest go first once there are many. Answers
 * {@code history_request}. Used by any thread.
 */
final class History implements Handler {

    static final int CAPACITY = 10_000;

    /** Longer results are cut: ten thousand of the longest would be gigabytes. */
    private static final int LONGEST_OUTPUT = 10_000;

    /** The only session there is: an earlier one left nothing behind. */
    private static final int SESSION = 1;

    private final Deque<Entry> entries = new ArrayDeque<>();

    private record Entry(int line, String input, Optional<String> output) {}

    synchronized void add(int line, String input, Optional<String> output) {
        if (entries.size() == CAPACITY) {
            entries.removeFirst();
        }
        entries.addLast(new Entry(line, input, output.map(History::cut)));
    }

    private static String cut(String output) {
        return output.length() <= LONGEST_OUTPUT ? output : output.substring(0, LONGEST_OUTPUT) + "…";
    }

    @Override
    public Optional<ObjectNode> answer(Request request) {
        Content content = request.content();
        String access = content.text("hist_access_type", "tail");
        List<Entry> found = switch (access) {
            case "tail" -> last(all(), content.integer("n"));
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
        for (Entry entry : found) {
            ArrayNode item = list.addArray().add(SESSION).add(entry.line());
            if (withOutput) {
                ArrayNode pair = item.addArray().add(entry.input());
                entry.output().ifPresentOrElse(pair::add, pair::addNull);
            } else {
                item.add(entry.input());
            }
        }
        return Optional.of(reply);
    }

    /** Session 0 is the current one; negative ones are past and gone. The stop is exclusive. */
    private List<Entry> range(Content content) {
        int session = content.integer("session").orElse(0);
        if (session != 0 && session != SESSION) {
            return List.of();
        }
        int start = content.integer("start").orElse(0);
        int stop = content.integer("stop").orElse(Integer.MAX_VALUE);
        return all().stream()
                .filter(entry -> entry.line() >= start && entry.line() < stop)
                .toList();
    }

    private List<Entry> search(Content content) {
        Pattern pattern = glob(content.text("pattern", "*"));
        List<Entry> found = all().stream()
                .filter(entry -> pattern.matcher(entry.input()).matches())
                .toList();
        return last(content.flag("unique", false) ? latestOfEach(found) : found, content.integer("n"));
    }

    private synchronized List<Entry> all() {
        return List.copyOf(entries);
    }

    private static List<Entry> last(List<Entry> found, OptionalInt n) {
        int count = Math.min(found.size(), Math.max(0, n.orElse(found.size())));
        return found.subList(found.size() - count, found.size());
    }

    private static List<Entry> latestOfEach(List<Entry> found) {
        List<Entry> latest = new ArrayList<>();
        Set<String> seen = new HashSet<>();
        for (int i = found.size() - 1; i >= 0; i--) {
            if (seen.add(found.get(i).input())) {
                latest.add(found.get(i));
            }
        }
        Collections.reverse(latest);
        return latest;
    }

    /** A star stands for any text, a question mark for one character; runs of stars are one, to keep matching fast. */
    private static Pattern glob(String pattern) {
        StringBuilder regex = new StringBuilder();
        pattern.replaceAll("\\*+", "*").codePoints().forEach(c -> {
            switch (c) {
                case '*' -> regex.append(".*");
                case '?' -> regex.append('.');
                default -> regex.append(Pattern.quote(Character.toString(c)));
            }
        });
        return Pattern.compile(regex.toString(), Pattern.DOTALL);
    }
}
