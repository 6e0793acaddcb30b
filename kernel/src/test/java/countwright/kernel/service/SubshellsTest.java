package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Message;
import java.util.List;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

@Timeout(30)
@SuppressWarnings("NullAway.Init")
class SubshellsTest {

    private final ConnectionFile connection = ConnectionFile.create("countwright");
    private final FakeEngine engine = new FakeEngine();
    private KernelServer server;
    private FrontEnd front;

    @BeforeEach
    void start() throws Exception {
        server = KernelServer.start(connection, () -> engine);
        front = new FrontEnd(connection);
    }

    @AfterEach
    void stop() {
        front.close();
        server.close();
    }

    @Test
    void subshell_isListedFromItsCreationToItsDeletion() throws Exception {
        String first = create();
        String second = create();

        assertThat(listed()).isEqualTo("['" + first + "','" + second + "']");
        assertThat(status(front.reply(delete(first)))).isEqualTo("ok");
        assertThat(listed()).isEqualTo("['" + second + "']");
        assertThat(status(front.reply(delete(first)))).isEqualTo("error");
    }

    @Test
    void unknownSubshell_eachRequestGetsAnError() throws Exception {
        for (String type : List.of("kernel_info_request", "complete_request", "execute_request")) {
            var reply = front.reply(front.sendTo("nowhere", type, "{'code':'abc'}"));
            assertThat(reply.type()).isEqualTo(type.replace("request", "reply"));
            assertThat(status(reply)).isEqualTo("error");
            assertThat(reply.content().path("evalue").stringValue()).contains("no subshell 'nowhere'");
        }
    }

    @Test
    void whileACellOfTheMainShellRuns_theSubshellAnswersQuestions_andItsCellWaits() throws Exception {
        String shell = create();
        Message running = front.execute("block");
        front.await(Channel.IOPUB, "stream", running);
        Message cell = front.sendTo(shell, "execute_request", "{'code':'value 7'}");

        for (String type : List.of(
                "kernel_info_request",
                "complete_request",
                "inspect_request",
                "is_complete_request",
                "history_request",
                "comm_info_request")) {
            Message reply = front.reply(front.sendTo(shell, type, "{'code':'abc'}"));
            assertThat(reply.parent().orElseThrow().toJson().path("subshell_id").stringValue())
                    .isEqualTo(shell);
        }
        assertThat(front.about(cell, Channel.SHELL)).isEmpty();
        assertThat(front.about(cell, Channel.IOPUB)).isEmpty();

        engine.release.add("go");
        assertThat(status(front.reply(running))).isEqualTo("ok");
        assertThat(status(front.reply(cell))).isEqualTo("ok");
        assertThat(front.publishedTypes(cell)).containsExactly("status", "execute_input", "execute_result", "status");
    }

    @Test
    void failedCell_abortsTheCellsOfItsOwnShellOnly() throws Exception {
        String shell = create();
        Message failing = front.execute("block");
        front.await(Channel.IOPUB, "stream", failing);
        Message sameShell = front.execute("print same");
        Message otherShell = front.sendTo(shell, "execute_request", "{'code':'print other'}");
        front.reply(front.send(Channel.SHELL, "kernel_info_request", "{}"));
        engine.release.add("BrokenException");

        assertThat(status(front.reply(failing))).isEqualTo("error");
        assertThat(status(front.reply(sameShell))).isEqualTo("aborted");
        assertThat(status(front.reply(otherShell))).isEqualTo("ok");
    }

    @Test
    void cellsOfASubshell_keepTheirOrder() throws Exception {
        String shell = create();
        List<Message> cells = List.of(
                front.sendTo(shell, "execute_request", "{'code':'value 1'}"),
                front.sendTo(shell, "execute_request", "{'code':'value 2'}"),
                front.sendTo(shell, "execute_request", "{'code':'value 3'}"));

        for (int i = 0; i < cells.size(); i++) {
            assertThat(front.reply(cells.get(i))
                            .content()
                            .path("execution_count")
                            .intValue())
                    .isEqualTo(i + 1);
        }
    }

    @Test
    void deletedWithWaitingCells_answersThemAsAborted() throws Exception {
        String shell = create();
        Message running = front.execute("block");
        front.await(Channel.IOPUB, "stream", running);
        Message first = front.sendTo(shell, "execute_request", "{'code':'value 1'}");
        Message second = front.sendTo(shell, "execute_request", "{'code':'value 2'}");
        front.reply(front.send(Channel.SHELL, "kernel_info_request", "{}"));

        assertThat(status(front.reply(delete(shell)))).isEqualTo("ok");
        assertThat(status(front.reply(first))).isEqualTo("aborted");
        assertThat(status(front.reply(second))).isEqualTo("aborted");

        engine.release.add("go");
        assertThat(status(front.reply(running))).isEqualTo("ok");
    }

    @Test
    void create_beyondTheMost_isRefused() throws Exception {
        for (int i = 0; i < 64; i++) {
            create();
        }
        var refused = front.reply(front.send(Channel.CONTROL, "create_subshell_request", "{}"));
        assertThat(refused.content().path("ename").stringValue()).isEqualTo("TooManySubshells");
    }

    private String create() throws InterruptedException {
        var reply = front.reply(front.send(Channel.CONTROL, "create_subshell_request", "{}"));
        assertThat(status(reply)).isEqualTo("ok");
        return reply.content().path("subshell_id").stringValue();
    }

    private Message delete(String id) {
        return front.send(Channel.CONTROL, "delete_subshell_request", "{'subshell_id':'" + id + "'}");
    }

    private String listed() throws InterruptedException {
        return front.reply(front.send(Channel.CONTROL, "list_subshell_request", "{}"))
                .content()
                .path("subshell_id")
                .toString()
                .replace('"', '\'');
    }

    private static String status(Message reply) {
        return reply.content().path("status").stringValue("");
    }
}
