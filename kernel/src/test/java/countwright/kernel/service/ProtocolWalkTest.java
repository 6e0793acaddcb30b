package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.cell.JShellEngine;
import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Message;
import countwright.kernel.worker.WorkerSettings;
import java.io.File;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import java.util.TreeSet;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import java.util.stream.Collectors;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.MethodOrderer;
import org.junit.jupiter.api.Order;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestMethodOrder;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;

/**
 * Walks every type of message of the protocol, over sockets, against the real engine with a real worker, and holds each
 * that is sent or heard against {@link MessageSchema}: header, parent, channel, fields and their types. The tests build
 * on one another only in that the last sees what all of them heard.
 */
@Timeout(120)
@TestMethodOrder(MethodOrderer.OrderAnnotation.class)
@SuppressWarnings("NullAway.Init")
class ProtocolWalkTest {

    private static KernelServer server;
    private static FrontEnd front;
    private static CompletableFuture<KernelServer.Ending> ending;

    @BeforeAll
    static void start() throws Exception {
        ConnectionFile connection = ConnectionFile.create("countwright");
        server = KernelServer.start(
                connection, Optional.empty(), () -> JShellEngine.start(WorkerSettings.ofInstallation()));
        ending = CompletableFuture.supplyAsync(ProtocolWalkTest::awaitShutdown);
        front = new FrontEnd(connection);
    }

    @AfterAll
    static void stop() {
        front.close();
        server.close();
    }

    @AfterEach
    void everyMessage_isAsTheProtocolSays() {
        List<String> faults = front.all().stream()
                .flatMap(item -> MessageSchema.faultsOf(item.message(), item.channel()).stream())
                .distinct()
                .toList();
        assertThat(faults).isEmpty();
    }

    @Test
    void kernelInfo() throws Exception {
        for (Channel channel : List.of(Channel.SHELL, Channel.CONTROL)) {
            Message request = front.send(channel, "kernel_info_request", "{}");
            assertThat(front.reply(request).type()).isEqualTo("kernel_info_reply");
            assertThat(front.publishedTypes(request)).containsExactly("status", "status");
        }
    }

    @Test
    void execute_everyKindOfOutput_inTheOrderInWhichItWasMade() throws Exception {
        Message cell = front.execute("""
                System.out.println("out");
                System.err.println("err");
                Shown place = showReplaceable("first");
                place.replaceWith(Table.of(numbers("faults", 3, 5)));
                clear();
                clearBeforeNext();
                page("a long table");
                nextInput("1 + 1");
                6 * 7
                """, "{'user_expressions':{'good':'1 + 1','bad':'nowhere'}}");
        var reply = front.reply(cell).content();

        List<Message> published = withoutSplitStreams(front.about(cell, Channel.IOPUB));
        assertThat(published)
                .extracting(Message::type)
                .containsExactly(
                        "status",
                        "execute_input",
                        "stream",
                        "stream",
                        "display_data",
                        "update_display_data",
                        "clear_output",
                        "clear_output",
                        "execute_result",
                        "status");
        assertThat(published.get(4).content().at("/transient/display_id"))
                .isEqualTo(published.get(5).content().at("/transient/display_id"));
        assertThat(reply.path("status").stringValue()).isEqualTo("ok");
        assertThat(reply.path("payload").size()).isEqualTo(2);
        assertThat(reply.at("/user_expressions/good/data/text~1plain").stringValue())
                .isEqualTo("2");
        assertThat(reply.at("/user_expressions/bad/status").stringValue()).isEqualTo("error");
    }

    @Test
    void execute_error_thenWhatWaitedIsAborted() throws Exception {
        Message failing = front.execute("Thread.sleep(300); throw new IllegalStateException(\"no exposure\");");
        Message waiting = front.execute("1");

        assertThat(front.reply(failing).content().path("ename").stringValue()).isEqualTo("IllegalStateException");
        assertThat(front.publishedTypes(failing)).containsExactly("status", "execute_input", "error", "status");
        assertThat(front.reply(waiting).content().path("status").stringValue()).isEqualTo("aborted");
        assertThat(front.publishedTypes(waiting)).containsExactly("status", "status");
    }

    @Test
    void execute_silent_publishesNoInputAndNoResult() throws Exception {
        Message cell = front.execute("6 * 7", "{'silent':true}");
        front.reply(cell);

        assertThat(front.publishedTypes(cell)).containsExactly("status", "status");
    }

    @Test
    void input_isAskedOnStdin_hiddenOrNot() throws Exception {
        Message cell = front.execute(
                "ask(\"depot?\") + askHidden(\"key?\") + new Scanner(System.in).nextLine()", "{'allow_stdin':true}");
        for (String answer : List.of("a", "b", "c")) {
            Message question = front.awaitQuestion(cell);
            assertThat(question.content().path("password").booleanValue()).isEqualTo(answer.equals("b"));
            front.answer(question, answer);
        }

        front.reply(cell);
        assertThat(front.await(Channel.IOPUB, "execute_result", cell)
                        .content()
                        .at("/data/text~1plain")
                        .stringValue())
                .isEqualTo("abc");
    }

    @Test
    void complete_countsCodePoints() throws Exception {
        var reply = front.reply(front.send(
                        Channel.SHELL, "complete_request", "{'code':'/* 🚋🚋 */ Integer.MAX_V 🚋','cursor_pos':22}"))
                .content();

        assertThat(reply.path("matches").toString()).isEqualTo("[\"MAX_VALUE\"]");
        assertThat(reply.path("cursor_start").intValue()).isEqualTo(17);
        assertThat(reply.path("cursor_end").intValue()).isEqualTo(22);
        assertThat(reply.at("/metadata/_jupyter_types_experimental/0/type").stringValue(""))
                .isNotEmpty();
    }

    @Test
    void inspect_bothLevels_andWhereNothingIs() throws Exception {
        for (int level : new int[] {0, 1}) {
            var found = front.reply(front.send(
                            Channel.SHELL,
                            "inspect_request",
                            "{'code':'Table.read','cursor_pos':8,'detail_level':" + level + "}"))
                    .content();
            assertThat(found.path("found").booleanValue()).isTrue();
        }
        var nothing = front.reply(
                        front.send(Channel.SHELL, "inspect_request", "{'code':'nowhere at all','cursor_pos':3}"))
                .content();
        assertThat(nothing.path("found").booleanValue()).isFalse();
    }

    @Test
    void isComplete_eachAnswer() throws Exception {
        for (String[] each :
                new String[][] {{"int x = 1;", "complete"}, {"if (true) {", "incomplete"}, {"f(]", "invalid"}}) {
            var reply = front.reply(front.send(Channel.SHELL, "is_complete_request", "{'code':'" + each[0] + "'}"))
                    .content();
            assertThat(reply.path("status").stringValue()).isEqualTo(each[1]);
        }
    }

    @Test
    void history_eachAccess() throws Exception {
        front.reply(front.execute("\"for the history\""));
        for (String content : List.of(
                "{'hist_access_type':'tail','n':1,'output':true,'raw':true}",
                "{'hist_access_type':'range','session':0,'start':0,'stop':1000}",
                "{'hist_access_type':'search','pattern':'*the h?story*','unique':true}")) {
            var reply = front.reply(front.send(Channel.SHELL, "history_request", content))
                    .content();
            assertThat(reply.path("history").toString()).contains("for the history");
        }
        assertThat(front.reply(front.send(Channel.SHELL, "history_request", "{'hist_access_type':'what'}"))
                        .content()
                        .path("status")
                        .stringValue())
                .isEqualTo("error");
    }

    @Test
    void connect() throws Exception {
        assertThat(front.reply(front.send(Channel.SHELL, "connect_request", "{}"))
                        .type())
                .isEqualTo("connect_reply");
    }

    @Test
    void comms_bothDirections_alsoWhileACellRuns() throws Exception {
        front.reply(front.execute("Comms.onOpen(\"echo\", comm -> comm.onMessage(data -> {"
                + " System.out.print(\"heard\"); comm.send(data); }));"));
        Message running = front.execute("System.out.println(\"on\"); while (true) {}");
        front.await(Channel.IOPUB, "stream", running);

        front.awaitIdle(front.send(Channel.SHELL, "comm_open", "{'comm_id':'c1','target_name':'echo','data':{}}"));
        Message message = front.send(Channel.SHELL, "comm_msg", "{'comm_id':'c1','data':{'n':[1,null]}}");
        front.awaitIdle(message);
        Message info = front.send(Channel.SHELL, "comm_info_request", "{'target_name':'echo'}");
        Message unknown = front.send(Channel.SHELL, "comm_open", "{'comm_id':'c2','target_name':'nowhere','data':{}}");
        front.awaitIdle(unknown);
        front.awaitIdle(front.send(Channel.SHELL, "comm_close", "{'comm_id':'c1','data':{}}"));

        assertThat(front.publishedTypes(message)).containsSubsequence("status", "stream", "comm_msg", "status");
        assertThat(front.await(Channel.IOPUB, "comm_msg", message).content())
                .isEqualTo(FrontEnd.json("{'comm_id':'c1','data':{'n':[1,null]}}"));
        assertThat(front.reply(info).content().path("comms")).isEqualTo(FrontEnd.json("{'c1':{'target_name':'echo'}}"));
        assertThat(front.publishedTypes(unknown)).contains("comm_close");
        assertThat(front.about(running, Channel.SHELL)).isEmpty();

        Message interrupt = front.send(Channel.CONTROL, "interrupt_request", "{}");
        assertThat(front.reply(interrupt).type()).isEqualTo("interrupt_reply");
        assertThat(front.reply(running).content().path("ename").stringValue()).isEqualTo("Interrupted");

        Message cell =
                front.execute("var lamp = Comms.open(\"lamp\", Map.of(\"n\", 1)); lamp.send(Map.of()); lamp.close();");
        front.reply(cell);
        assertThat(front.publishedTypes(cell))
                .containsExactly("status", "execute_input", "comm_open", "comm_msg", "comm_close", "status");
    }

    @Test
    void subshells_fromCreationToDeletion() throws Exception {
        String id = front.reply(front.send(Channel.CONTROL, "create_subshell_request", "{}"))
                .content()
                .path("subshell_id")
                .stringValue();
        Message cell = front.sendTo(id, "execute_request", "{'code':'6 * 7'}");
        assertThat(front.reply(cell).content().path("status").stringValue()).isEqualTo("ok");
        assertThat(front.reply(cell).parent()).contains(cell.header());
        var listed = front.reply(front.send(Channel.CONTROL, "list_subshell_request", "{}"))
                .content();
        assertThat(listed.path("subshell_id").toString()).contains(id);
        front.reply(front.send(Channel.CONTROL, "delete_subshell_request", "{'subshell_id':'" + id + "'}"));
        var gone = front.reply(front.sendTo(id, "kernel_info_request", "{}")).content();
        assertThat(gone.path("status").stringValue()).isEqualTo("error");
    }

    @Test
    @EnabledOnOs(value = OS.LINUX, disabledReason = "other systems tell less")
    void usage_namesTheWorkerToo() throws Exception {
        front.reply(front.execute("1"));
        front.reply(front.send(Channel.CONTROL, "usage_request", "{}"));
        var usage =
                front.reply(front.send(Channel.CONTROL, "usage_request", "{}")).content();
        long kernel = usage.at("/processes/kernel/memory").longValue();
        long worker = usage.at("/processes/worker/memory").longValue();
        assertThat(kernel).isGreaterThan(10L << 20);
        assertThat(worker).isGreaterThan(10L << 20);
        assertThat(usage.path("kernel_memory").longValue()).isEqualTo(kernel + worker);
    }

    @Test
    void debug_isRefused() throws Exception {
        var reply = front.reply(front.send(
                        Channel.CONTROL, "debug_request", "{'type':'request','seq':1,'command':'initialize'}"))
                .content();
        assertThat(reply.path("status").stringValue()).isEqualTo("error");
    }

    @Test
    @Order(Integer.MAX_VALUE)
    void shutdown_isAnsweredAndPublished_andByThenEveryTypeHasBeenSeen() throws Exception {
        Message request = front.send(Channel.CONTROL, "shutdown_request", "{'restart':false}");
        front.await(Channel.CONTROL, "shutdown_reply", request);
        front.await(Channel.IOPUB, "shutdown_reply", request);
        assertThat(ending.get(30, TimeUnit.SECONDS)).isEqualTo(KernelServer.Ending.STOP);

        Set<String> seen =
                front.all().stream().map(item -> item.message().type()).collect(Collectors.toCollection(TreeSet::new));
        assertThat(seen).containsExactlyInAnyOrderElementsOf(messageTypes());
    }

    /** A text may go in several messages, as it happens; of those that follow each other the first is kept. */
    private static List<Message> withoutSplitStreams(List<Message> messages) {
        List<Message> kept = new ArrayList<>();
        for (Message message : messages) {
            boolean continues = !kept.isEmpty()
                    && message.type().equals("stream")
                    && message.content()
                            .path("name")
                            .equals(kept.get(kept.size() - 1).content().path("name"));
            if (!continues) {
                kept.add(message);
            }
        }
        return kept;
    }

    /** The files whose schema says on which channel a message goes; the others describe parts of messages. */
    private static Set<String> messageTypes() throws Exception {
        Path folder = Path.of(ProtocolWalkTest.class.getResource("protocol").toURI());
        File[] files = folder.toFile().listFiles();
        assertThat(files).isNotNull();
        return Arrays.stream(files)
                .map(file -> file.getName().replace(".json", ""))
                .filter(name -> name.matches("iopub_welcome|.*_(request|reply|data|open|msg|close|input|result|output)"
                        + "|status|stream|error"))
                .collect(Collectors.toCollection(TreeSet::new));
    }

    private static KernelServer.Ending awaitShutdown() {
        try {
            return server.awaitShutdown();
        } catch (InterruptedException e) {
            throw new IllegalStateException(e);
        }
    }
}
