package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.Message;
import java.nio.file.Path;
import java.time.Instant;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Random;
import java.util.Set;
import java.util.TreeMap;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * Kills the worker at random moments while requests of all kinds are under way: each must be answered once, and rightly.
 * The number of kills and the seed can be set with the system properties below.
 */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class ChaosKernelTest {

    private static final int KILLS = Integer.getInteger("countwright.chaos.kills", 15);
    private static final long SEED = Long.getLong("countwright.chaos.seed", 20261201L);

    private static final int MOST_DELAY_MILLIS = 350;

    /** How a cell may end that is hit by a kill or an interrupt, or stands behind one that is. */
    private static final Set<String> HIT =
            Set.of("WorkerLost", "Interrupted", "InterruptedException", "InterruptedIOException");

    private final Random random = new Random(SEED);
    private final List<Asked> asked = new ArrayList<>();
    private final Map<String, Integer> tally = new TreeMap<>();

    @TempDir
    private Path temporary;

    /** A request, and what its answer must hold if it is no error. */
    private record Asked(Kind kind, Channel channel, Message message, String expected) {}

    private enum Kind {
        VALUE,
        PRINTED,
        SLOW,
        COMPLETE,
        INSPECT,
        KERNEL_INFO,
        IS_COMPLETE,
        INTERRUPT
    }

    @Test
    void kills_loseNoRequestAndMakeNoReplyWrong() throws Exception {
        System.out.println("Chaos run: " + KILLS + " kills, seed " + SEED);
        try (LiveKernel kernel =
                LiveKernel.start(temporary, temporary, Map.of("COUNTWRIGHT_WORKER_OPTIONS", "-Xmx128m"))) {
            for (int kill = 0; kill < KILLS; kill++) {
                int before = asked.size();
                int first = 1 + random.nextInt(4);
                for (int i = 0; i < first; i++) {
                    ask(kernel);
                }
                Thread.sleep(random.nextInt(MOST_DELAY_MILLIS));
                killOne(kernel);
                int more = random.nextInt(4);
                for (int i = 0; i < more; i++) {
                    ask(kernel);
                }
                for (Asked each : asked.subList(before, asked.size())) {
                    kernel.reply(each.channel(), each.message());
                }
            }
            // The kernel lives, its cells work, and nothing that was asked long ago is answered again.
            assertThat(recovered(kernel)).isEqualTo("42");
            for (Asked each : asked) {
                check(kernel, each);
            }
        }
        System.out.println("Chaos run: " + asked.size() + " requests, each answered once and rightly: " + tally);
    }

    /** A cell sent while the last loss is not yet noticed may still be hit by it; the one after that may not. */
    private static String recovered(LiveKernel kernel) throws InterruptedException {
        kernel.run("6 * 7");
        return kernel.run("6 * 7").value();
    }

    private void ask(LiveKernel kernel) {
        Kind kind = Kind.values()[random.nextInt(Kind.values().length)];
        int number = asked.size() + 1;
        String token = Integer.toString(number * 7919);
        asked.add(
                switch (kind) {
                    case VALUE -> cell(kernel, kind, number + " * 7919", token);
                    case PRINTED -> cell(kernel, kind, "System.out.println(" + number + " * 7919);", token + "\n");
                    case SLOW ->
                        cell(kernel, kind, "Thread.sleep(" + random.nextInt(400) + ");\n" + number + " * 7919", token);
                    case COMPLETE ->
                        new Asked(
                                kind,
                                Channel.SHELL,
                                kernel.ask("complete_request", code("Math.sq").put("cursor_pos", 7)),
                                "sqrt(");
                    case INSPECT ->
                        new Asked(
                                kind,
                                Channel.SHELL,
                                kernel.ask(
                                        "inspect_request",
                                        code("Math.sqrt(2)")
                                                .put("cursor_pos", 7)
                                                .put("detail_level", 0)),
                                "double Math.sqrt");
                    case KERNEL_INFO ->
                        new Asked(kind, Channel.SHELL, kernel.ask("kernel_info_request", empty()), "countwright");
                    case IS_COMPLETE ->
                        new Asked(
                                kind,
                                Channel.SHELL,
                                kernel.ask("is_complete_request", code("int f() {")),
                                "incomplete");
                    case INTERRUPT -> new Asked(kind, Channel.CONTROL, kernel.askForInterrupt(), "ok");
                });
    }

    private Asked cell(LiveKernel kernel, Kind kind, String code, String expected) {
        ObjectNode content = code(code).put("allow_stdin", false).put("stop_on_error", random.nextBoolean());
        return new Asked(kind, Channel.SHELL, kernel.ask("execute_request", content), expected);
    }

    /** Mostly the worker, which is the oldest process; else the one in reserve. */
    private void killOne(LiveKernel kernel) {
        List<ProcessHandle> workers = kernel.workers().stream()
                .sorted(Comparator.comparing(each -> each.info().startInstant().orElse(Instant.MAX)))
                .toList();
        if (!workers.isEmpty()) {
            workers.get(random.nextInt(4) > 0 ? 0 : workers.size() - 1).destroyForcibly();
        }
    }

    private void check(LiveKernel kernel, Asked each) {
        List<JsonNode> replies = kernel.replies(each.channel(), each.message());
        assertThat(replies).as("replies to " + each).hasSize(1);
        JsonNode reply = replies.get(0);
        String status = reply.path("status").asString("");
        Optional<String> ending = ending(each, reply, status);
        tally.merge(each.kind() + " " + ending.orElse("ok"), 1, Integer::sum);
        if (ending.isPresent()) {
            return;
        }
        switch (each.kind()) {
            case VALUE, SLOW ->
                assertThat(kernel.outcome(each.message()).value())
                        .as("value of " + each)
                        .isEqualTo(each.expected());
            case PRINTED ->
                assertThat(kernel.outcome(each.message()).printed())
                        .as("output of " + each)
                        .endsWith(each.expected());
            default -> assertThat(reply.toString()).as("reply to " + each).contains(each.expected());
        }
    }

    /** Returns how a cell ended that did not end well, after checking that it had reason to. */
    private static Optional<String> ending(Asked each, JsonNode reply, String status) {
        boolean isCell = each.kind() == Kind.VALUE || each.kind() == Kind.PRINTED || each.kind() == Kind.SLOW;
        if (!isCell || status.equals("ok")) {
            return Optional.empty();
        }
        if (status.equals("aborted")) {
            return Optional.of(status);
        }
        String name = reply.path("ename").asString("");
        assertThat(name).as("error of " + each + ": " + reply).isIn(HIT);
        return Optional.of(name);
    }

    private static ObjectNode code(String code) {
        return empty().put("code", code);
    }

    private static ObjectNode empty() {
        return JsonNodeFactory.instance.objectNode();
    }
}
