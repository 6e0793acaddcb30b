package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Optional;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;

/** The history from one kernel to the next. */
@Timeout(60)
class KeptHistoryTest {

    @TempDir
    private Path folder = Path.of("");

    @Test
    void laterKernel_findsTheCellsOfEarlierOnes() throws Exception {
        try (Session first = new Session(file())) {
            first.run("value 1", "{}");
            first.run("value 2", "{}");
            first.run("value secret", "{'store_history':false}");
            first.run("value silent", "{'silent':true}");
        }
        try (Session second = new Session(file())) {
            assertThat(second.history("{'hist_access_type':'range','session':-1}"))
                    .as("before any cell of its own")
                    .isEqualTo("[[1,1,'value 1'],[1,2,'value 2']]");
            second.run("value 3", "{}");
        }
        try (Session third = new Session(file())) {
            third.run("value 4", "{}");

            assertThat(third.history("{'hist_access_type':'tail','n':3,'output':true}"))
                    .isEqualTo("[[1,2,['value 2','2']],[2,1,['value 3','3']],[3,1,['value 4','4']]]");
            assertThat(third.history("{'hist_access_type':'range','session':0,'start':1}"))
                    .isEqualTo("[[3,1,'value 4']]");
            assertThat(third.history("{'hist_access_type':'range','session':3,'start':1}"))
                    .isEqualTo("[[3,1,'value 4']]");
            assertThat(third.history("{'hist_access_type':'range','session':-1}"))
                    .isEqualTo("[[2,1,'value 3']]");
            assertThat(third.history("{'hist_access_type':'range','session':-2,'start':2,'stop':3}"))
                    .isEqualTo("[[1,2,'value 2']]");
            assertThat(third.history("{'hist_access_type':'range','session':-3}"))
                    .isEqualTo("[]");
            assertThat(third.history("{'hist_access_type':'search','pattern':'value [12]'}"))
                    .isEqualTo("[]");
            assertThat(third.history("{'hist_access_type':'search','pattern':'*e ?','n':2}"))
                    .isEqualTo("[[2,1,'value 3'],[3,1,'value 4']]");
        }
    }

    @Test
    void twoKernelsAtOnce_doNotMixTheirSessions() throws Exception {
        try (Session first = new Session(file());
                Session second = new Session(file())) {
            first.run("value 1", "{}");
            second.run("value 2", "{}");
            first.run("value 3", "{}");

            assertThat(first.history("{'hist_access_type':'tail'}"))
                    .isEqualTo("[[2,1,'value 2'],[1,1,'value 1'],[1,2,'value 3']]");
            assertThat(second.history("{'hist_access_type':'tail'}"))
                    .isEqualTo("[[1,1,'value 1'],[1,2,'value 3'],[2,1,'value 2']]");
        }
    }

    @Test
    void afterEachCell_itIsOnTheDisk() throws Exception {
        try (Session session = new Session(file())) {
            session.run("value 1", "{}");
            session.history("{}");
            assertThat(Files.readString(file())).contains("value 1").endsWith("\n");
        }
    }

    @Test
    void fileThatCannotBeWritten_failsNoCell() throws Exception {
        Files.writeString(folder.resolve("data"), "in the way");
        try (Session session = new Session(folder.resolve("data").resolve("history.jsonl"))) {
            session.run("value 1", "{}");
            session.run("value 2", "{}");

            assertThat(session.history("{'hist_access_type':'tail'}")).isEqualTo("[[1,1,'value 1'],[1,2,'value 2']]");
        }
    }

    private Path file() {
        return folder.resolve("history.jsonl");
    }

    private static final class Session implements AutoCloseable {

        private final KernelServer server;
        private final FrontEnd front;

        Session(Path file) throws Exception {
            ConnectionFile connection = ConnectionFile.create("countwright");
            server = KernelServer.start(connection, Optional.of(file), FakeEngine::new);
            front = new FrontEnd(connection);
        }

        void run(String code, String options) throws InterruptedException {
            assertThat(front.reply(front.execute(code, options))
                            .content()
                            .path("status")
                            .stringValue())
                    .isEqualTo("ok");
        }

        String history(String content) throws InterruptedException {
            return front.reply(front.send(Channel.SHELL, "history_request", content))
                    .content()
                    .path("history")
                    .toString()
                    .replace('"', '\'');
        }

        @Override
        public void close() {
            front.close();
            server.close();
        }
    }
}
