package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Message;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

@Timeout(30)
@SuppressWarnings("NullAway.Init")
class InputDeskTest {

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

    @ParameterizedTest
    @ValueSource(booleans = {true, false})
    void input_answer_reachesTheCell(boolean namingTheQuestion) throws Exception {
        Message cell = front.execute("ask Your name?", "{'allow_stdin':true}");
        Message question = front.await(Channel.STDIN, "input_request", cell);
        assertThat(question.content()).isEqualTo(FrontEnd.json("{'prompt':'Your name?','password':true}"));
        if (namingTheQuestion) {
            front.answer(question, "Ünal 😀");
        } else {
            front.answerWithoutParent("Ünal 😀");
        }
        front.reply(cell);
        assertThat(front.await(Channel.IOPUB, "execute_result", cell)
                        .content()
                        .at("/data/text~1plain")
                        .stringValue())
                .isEqualTo("got Ünal 😀");
    }

    @Test
    void input_notAllowed_isRefusedWithoutAsking() throws Exception {
        Message cell = front.execute("ask Your name?", "{'allow_stdin':false}");
        assertThat(front.reply(cell).content().path("evalue").stringValue()).contains("allow_stdin = false");
        assertThat(front.about(cell, Channel.STDIN)).isEmpty();
    }

    @Test
    void input_interrupted_isCancelledAndALateAnswerIsDropped() throws Exception {
        Message cell = front.execute("ask first", "{'allow_stdin':true}");
        Message question = front.await(Channel.STDIN, "input_request", cell);
        front.reply(front.send(Channel.CONTROL, "interrupt_request", "{}"));
        assertThat(front.reply(cell).content().path("evalue").stringValue()).contains("interrupted");

        Message next = front.execute("ask second", "{'allow_stdin':true}");
        Message nextQuestion = front.await(Channel.STDIN, "input_request", next);
        front.answer(question, "late");
        front.answer(nextQuestion, "in time");
        front.reply(next);
        assertThat(front.await(Channel.IOPUB, "execute_result", next)
                        .content()
                        .at("/data/text~1plain")
                        .stringValue())
                .isEqualTo("got in time");
    }

    @Test
    void input_answerFromAnotherFrontEnd_isIgnored() throws Exception {
        Message cell = front.execute("ask name", "{'allow_stdin':true}");
        Message question = front.await(Channel.STDIN, "input_request", cell);
        try (FrontEnd other = new FrontEnd(connection)) {
            other.answer(question, "from a stranger");
            // What the stranger sent is on its way before its next request is answered, but on another socket:
            // the assertion below is about whose answer counts, whichever comes first.
            other.reply(other.send(Channel.SHELL, "kernel_info_request", "{}"));
            front.answer(question, "from the owner");
            front.reply(cell);
        }
        assertThat(front.await(Channel.IOPUB, "execute_result", cell)
                        .content()
                        .at("/data/text~1plain")
                        .stringValue())
                .isEqualTo("got from the owner");
    }
}
