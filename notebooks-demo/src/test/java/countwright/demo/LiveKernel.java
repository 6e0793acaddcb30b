package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.fail;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ClientSockets;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Message;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.concurrent.TimeUnit;
import java.util.function.Function;
import java.util.function.Predicate;
import java.util.stream.Collectors;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/** The installed kernel, started and spoken to over its sockets as a front end would. */
final class LiveKernel implements AutoCloseable {

    private static final long LIMIT_SECONDS = 90;

    private final List<Heard> heard = new ArrayList<>();
    private final Process process;
    private final Path log;
    private final ConnectionFile connection;
    private final ClientSockets sockets;

    private record Heard(Channel channel, Message message, long nanoTime) {}

    /**
     * What became of a cell.
     *
     * @param printed its standard output
     * @param value the plain text of its result, empty if it had none
     * @param error name, message and traceback of its error as a reader sees them, empty if it had none
     */
    record Outcome(String printed, String value, String error) {}

    private LiveKernel(Process process, Path log, ConnectionFile connection) {
        this.process = process;
        this.log = log;
        this.connection = connection;
        this.sockets = ClientSockets.connect(connection, "tester", (channel, envelope) -> {
            synchronized (heard) {
                heard.add(new Heard(channel, envelope.message(), System.nanoTime()));
                heard.notifyAll();
            }
        });
    }

    /** Starts a kernel that works in a folder, and waits until it answers and can be heard. */
    static LiveKernel start(Path workingFolder, Path temporary, Map<String, String> environment) throws Exception {
        ConnectionFile connection = ConnectionFile.create("countwright");
        Path file = temporary.resolve("connection.json");
        connection.write(file);
        LiveKernel kernel = new LiveKernel(
                process(workingFolder, temporary, file, environment), temporary.resolve("kernel.log"), connection);
        kernel.await(Channel.SHELL, kernel.send(Channel.SHELL, "kernel_info_request", empty()), message -> true);
        kernel.sockets.subscribed().get(LIMIT_SECONDS, TimeUnit.SECONDS);
        return kernel;
    }

    private static Process process(Path workingFolder, Path temporary, Path file, Map<String, String> environment)
            throws IOException {
        ProcessBuilder builder = new ProcessBuilder(
                        Demo.distribution().resolve("bin/countwright").toString(), "connect", file.toString())
                .directory(workingFolder.toFile())
                .redirectErrorStream(true)
                .redirectOutput(temporary.resolve("kernel.log").toFile());
        builder.environment().putAll(environment);
        return builder.start();
    }

    ConnectionFile connection() {
        return connection;
    }

    ProcessHandle process() {
        return process.toHandle();
    }

    /** Forgets what has been heard so far, to keep long tests quick. */
    void forget() {
        synchronized (heard) {
            heard.clear();
        }
    }

    /** Sends a request and waits for its reply on the same channel. */
    Message ask(Channel channel, String type, ObjectNode content) throws InterruptedException {
        Message request = send(channel, type, content);
        String replyType = type.replace("_request", "_reply");
        await(channel, request, message -> message.type().equals(replyType));
        synchronized (heard) {
            return heard.stream()
                    .filter(item -> item.channel() == channel && item.message().isCausedBy(request.header()))
                    .map(Heard::message)
                    .findFirst()
                    .orElseThrow();
        }
    }

    /** Runs a cell to its end. */
    Outcome run(String code) throws InterruptedException {
        return end(begin(code));
    }

    /** Sends a cell to be run. */
    Message begin(String code) {
        return send(Channel.SHELL, "execute_request", empty().put("code", code).put("allow_stdin", false));
    }

    /** Sends a cell that may ask for input. */
    Message beginAsking(String code) {
        return send(Channel.SHELL, "execute_request", empty().put("code", code).put("allow_stdin", true));
    }

    /** Waits until a cell has asked for input. */
    void awaitQuestion(Message cell) throws InterruptedException {
        await(Channel.STDIN, cell, message -> message.type().equals("input_request"));
    }

    /** Asks for something on the shell channel, and does not wait for the reply. */
    Message ask(String type, ObjectNode content) {
        return send(Channel.SHELL, type, content);
    }

    /** Asks for the running cell to be interrupted, and does not wait for the reply. */
    Message askForInterrupt() {
        return send(Channel.CONTROL, "interrupt_request", empty());
    }

    /** Waits for the reply to something asked, and returns its content. */
    JsonNode reply(Channel channel, Message request) throws InterruptedException {
        return await(channel, request, message -> message.type().endsWith("_reply"))
                .message()
                .content();
    }

    /** Returns all that has been replied to something asked. */
    List<JsonNode> replies(Channel channel, Message request) {
        synchronized (heard) {
            return heard.stream()
                    .filter(item -> item.channel() == channel && item.message().isCausedBy(request.header()))
                    .<JsonNode>map(item -> item.message().content())
                    .toList();
        }
    }

    /** Returns when the reply to a cell that has ended arrived here, in the terms of {@link System#nanoTime}. */
    long repliedAt(Message cell) throws InterruptedException {
        return await(Channel.SHELL, cell, message -> message.type().equals("execute_reply"))
                .nanoTime();
    }

    /** Waits until a cell has written a text to its error stream, and returns when that arrived. */
    long complainedAt(Message cell, String text) throws InterruptedException {
        return await(
                        Channel.IOPUB,
                        cell,
                        message -> message.type().equals("stream")
                                && message.content().path("name").asString("").equals("stderr")
                                && message.content().path("text").asString("").contains(text))
                .nanoTime();
    }

    /** Returns the processes that the kernel has started: the worker, and one in reserve. */
    List<ProcessHandle> workers() {
        return process.descendants().toList();
    }

    /** Waits until a cell has printed something. */
    void awaitOutput(Message cell) throws InterruptedException {
        await(Channel.IOPUB, cell, message -> message.type().equals("stream"));
    }

    /** Waits until a cell has printed so many characters. */
    void awaitPrinted(Message cell, long characters) throws InterruptedException {
        long deadline = System.nanoTime() + TimeUnit.SECONDS.toNanos(LIMIT_SECONDS);
        synchronized (heard) {
            while (texts(cell, "stream", content -> content.path("text").asString(""))
                            .length()
                    < characters) {
                assertThat(System.nanoTime()).as("time, for the cell to print").isLessThan(deadline);
                heard.wait(100);
            }
        }
    }

    /** Waits until nothing has been heard of a running cell for a while. */
    void awaitSilence(Message cell, Duration silence) throws InterruptedException {
        awaitOutput(cell);
        int before = -1;
        synchronized (heard) {
            while (heard.size() != before) {
                before = heard.size();
                long end = System.nanoTime() + silence.toNanos();
                for (long left = silence.toMillis(); left > 0; left = (end - System.nanoTime()) / 1_000_000) {
                    heard.wait(left);
                }
            }
        }
    }

    /** Waits for the reply to a cell, which may come before all of its output. */
    void awaitReply(Message cell) throws InterruptedException {
        await(Channel.SHELL, cell, message -> message.type().equals("execute_reply"));
    }

    /** Waits for the end of a cell. */
    Outcome end(Message cell) throws InterruptedException {
        await(Channel.SHELL, cell, message -> message.type().equals("execute_reply"));
        await(
                Channel.IOPUB,
                cell,
                message -> message.type().equals("status")
                        && message.content()
                                .path("execution_state")
                                .asString("")
                                .equals("idle"));
        return outcome(cell);
    }

    /** Returns what has been heard of a cell that has ended. */
    Outcome outcome(Message cell) {
        return new Outcome(
                texts(cell, "stream", content -> content.path("text").asString("")),
                texts(
                        cell,
                        "execute_result",
                        content -> content.path("data").path("text/plain").asString("")),
                texts(cell, "error", LiveKernel::error));
    }

    /** Asks for the running cell to be interrupted, and waits for the answer. */
    void interrupt() throws InterruptedException {
        Message request = send(Channel.CONTROL, "interrupt_request", empty());
        await(Channel.CONTROL, request, message -> message.type().equals("interrupt_reply"));
    }

    /** Asks the kernel to end, waits for the answer and for the end, and returns how long that took from the asking. */
    Duration shutDown(Channel channel) throws InterruptedException {
        long asked = System.nanoTime();
        Message request = send(channel, "shutdown_request", empty().put("restart", false));
        process.waitFor(LIMIT_SECONDS, TimeUnit.SECONDS);
        Duration taken = Duration.ofNanos(System.nanoTime() - asked);
        await(channel, request, message -> message.type().equals("shutdown_reply"), () -> {});
        return taken;
    }

    private static String error(JsonNode content) {
        return content.path("traceback")
                .valueStream()
                .map(line -> line.asString("").replaceAll("\u001b\\[[0-9;]*m", ""))
                .collect(Collectors.joining("\n"));
    }

    private String texts(Message cell, String type, Function<JsonNode, String> text) {
        synchronized (heard) {
            return heard.stream()
                    .filter(item -> item.channel() == Channel.IOPUB
                            && item.message().type().equals(type)
                            && item.message().isCausedBy(cell.header()))
                    .map(item -> text.apply(item.message().content()))
                    .collect(Collectors.joining());
        }
    }

    private Message send(Channel channel, String type, ObjectNode content) {
        Message request = sockets.request(type, content);
        sockets.send(channel, request);
        return request;
    }

    private Heard await(Channel channel, Message cause, Predicate<Message> wanted) throws InterruptedException {
        return await(channel, cause, wanted, () -> {
            if (!process.isAlive()) {
                fail("The kernel ended with " + process.exitValue() + "; the end of its log: " + endOfLog());
            }
        });
    }

    private Heard await(Channel channel, Message cause, Predicate<Message> wanted, Runnable meanwhile)
            throws InterruptedException {
        long deadline = System.nanoTime() + TimeUnit.SECONDS.toNanos(LIMIT_SECONDS);
        synchronized (heard) {
            int next = 0;
            while (true) {
                for (; next < heard.size(); next++) {
                    Heard item = heard.get(next);
                    if (item.channel() == channel
                            && item.message().isCausedBy(cause.header())
                            && wanted.test(item.message())) {
                        return item;
                    }
                }
                meanwhile.run();
                long left = TimeUnit.NANOSECONDS.toMillis(deadline - System.nanoTime());
                assertThat(left).as("time left for " + cause.type()).isPositive();
                heard.wait(Math.min(left, 500));
            }
        }
    }

    private String endOfLog() {
        try {
            String all = Files.readString(log);
            return all.substring(Math.max(0, all.length() - 3000));
        } catch (IOException e) {
            return "(not readable: " + e + ")";
        }
    }

    private static ObjectNode empty() {
        return JsonNodeFactory.instance.objectNode();
    }

    /** Asks the kernel to end unless it has, waits until it has, and fails if it does not. */
    @Override
    public void close() {
        List<ProcessHandle> workers = process.descendants().toList();
        send(Channel.CONTROL, "shutdown_request", empty().put("restart", false));
        boolean stillRuns = process.onExit()
                .completeOnTimeout(process, 10, TimeUnit.SECONDS)
                .join()
                .isAlive();
        sockets.close();
        workers.forEach(ProcessHandle::destroyForcibly);
        process.destroyForcibly();
        assertThat(stillRuns)
                .as("the kernel still runs after being asked to end")
                .isFalse();
    }
}
