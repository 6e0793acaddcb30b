package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Message;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

@Timeout(30)
@SuppressWarnings("NullAway.Init")
class CommDeskTest {

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
    void commOpen_unknownTarget_isClosed() throws Exception {
        Message open = front.send(Channel.SHELL, "comm_open", "{'comm_id':'c1','target_name':'t','data':{}}");
        front.awaitIdle(open);
        assertThat(front.await(Channel.IOPUB, "comm_close", open).content())
                .isEqualTo(FrontEnd.json("{'comm_id':'c1','data':{}}"));
    }

    @Test
    void comm_openedByTheFrontEnd_isListedAnsweredAndClosed() throws Exception {
        Message open = front.send(Channel.SHELL, "comm_open", "{'comm_id':'c1','target_name':'echo','data':{}}");
        front.awaitIdle(open);
        assertThat(comms("{}")).isEqualTo("{'c1':{'target_name':'echo'}}");
        assertThat(comms("{'target_name':'other'}")).isEqualTo("{}");

        String data = "{'n':[1,2.5,null,{'k':'v'}],'big':9007199254740993,'flag':true}";
        Message message = front.send(Channel.SHELL, "comm_msg", "{'comm_id':'c1','data':" + data + "}");
        front.awaitIdle(message);
        assertThat(front.publishedTypes(message)).containsExactly("status", "stream", "comm_msg", "status");
        assertThat(front.await(Channel.IOPUB, "comm_msg", message).content())
                .isEqualTo(FrontEnd.json("{'comm_id':'c1','data':" + data + "}"));

        front.awaitIdle(front.send(Channel.SHELL, "comm_close", "{'comm_id':'c1','data':{}}"));
        assertThat(comms("{}")).isEqualTo("{}");
        Message late = front.send(Channel.SHELL, "comm_msg", "{'comm_id':'c1','data':{}}");
        front.awaitIdle(late);
        assertThat(front.publishedTypes(late)).containsExactly("status", "status");
    }

    @Test
    void comm_openedByACell_isPublishedUnderIt_andClosedWhenTheWorkerIsLost() throws Exception {
        front.awaitIdle(front.send(Channel.SHELL, "comm_open", "{'comm_id':'c1','target_name':'echo','data':{}}"));
        Message cell = front.execute("comm c2");
        assertThat(front.await(Channel.IOPUB, "comm_open", cell).content())
                .isEqualTo(FrontEnd.json("{'comm_id':'c2','target_name':'lamp','data':{'n':1}}"));
        front.reply(cell);

        engine.lossActions.forEach(Runnable::run);

        front.awaitPublished("comm_close", "c1");
        front.awaitPublished("comm_close", "c2");
        assertThat(comms("{}")).isEqualTo("{}");
    }

    @Test
    void comm_malformed_isIgnoredBetweenBusyAndIdle() throws Exception {
        Message open = front.send(Channel.SHELL, "comm_open", "{'comm_id':7,'target_name':'echo','data':[]}");
        front.awaitIdle(open);
        assertThat(front.publishedTypes(open)).containsExactly("status", "status");
    }

    private String comms(String content) throws InterruptedException {
        var reply = front.reply(front.send(Channel.SHELL, "comm_info_request", content));
        return reply.content().path("comms").toString().replace('"', '\'');
    }
}
