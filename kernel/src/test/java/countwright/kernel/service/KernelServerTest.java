package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Header;
import countwright.kernel.wire.Message;
import java.util.List;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.EnumSource;

@Timeout(30)
@SuppressWarnings("NullAway.Init")
class KernelServerTest {

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
    @CsvSource(
            delimiter = '|',
            quoteCharacter = '`',
            value = {
                "kernel_info_request | {}",
                "execute_request | {'code':'print hello'}",
                "execute_request | {'code':'value 7'}",
                "execute_request | {'code':'fail it'}",
                "execute_request | {'code':'crash'}",
                "execute_request | {'code':'overflow'}",
                "execute_request | {'code':'show'}",
                "execute_request | {'code':''}",
                "execute_request | {}",
                "execute_request | {'code':7}",
                "execute_request | {'code':'value 1','user_expressions':[]}",
                "is_complete_request | {'code':'int x'}",
                "complete_request | {'code':'abcd','cursor_pos':4}",
                "complete_request | {'code':'a','cursor_pos':1}",
                "complete_request | {}",
                "inspect_request | {'code':'abcd','cursor_pos':2,'detail_level':1}",
                "history_request | {'hist_access_type':'tail','n':3}",
                "history_request | {'hist_access_type':'nonsense'}",
                "comm_info_request | {}",
                "interrupt_request | {}",
                "connect_request | {}",
                "usage_request | {}",
                "debug_request | {'type':'request','seq':1,'command':'initialize'}",
                "debug_request | {'seq':'one'}",
                "list_subshell_request | {}",
                "delete_subshell_request | {'subshell_id':'nowhere'}",
                "delete_subshell_request | {}",
            })
    void anyRequest_onEitherChannel_hasOneReplyAndItsOutputBetweenBusyAndIdle(String type, String content)
            throws Exception {
        for (Channel channel : List.of(Channel.SHELL, Channel.CONTROL)) {
            Message request = front.send(channel, type, content);
            Message reply = front.reply(request);
            // A later request on the same channel is answered after everything about the first was sent.
            front.reply(front.send(channel, "kernel_info_request", "{}"));

            assertThat(front.about(request, channel)).hasSize(1);
            assertThat(reply.type()).isEqualTo(type.replace("_request", "_reply"));
            assertThat(reply.parent()).contains(request.header());
            assertThat(reply.content().path("status").stringValue()).isNotEmpty();
            List<Message> published = front.about(request, Channel.IOPUB);
            assertThat(published).hasSizeGreaterThanOrEqualTo(2);
            assertThat(FrontEnd.state(published.get(0))).isEqualTo("busy");
            assertThat(FrontEnd.state(published.get(published.size() - 1))).isEqualTo("idle");
            assertThat(published.subList(1, published.size() - 1))
                    .noneMatch(message -> message.type().equals("status"));
        }
    }

    @Test
    void kernelInfo_always_claimsWhatIsTrue() throws Exception {
        var info = front.reply(front.send(Channel.SHELL, "kernel_info_request", "{}"))
                .content();
        assertThat(info.path("protocol_version").stringValue()).isEqualTo(Header.PROTOCOL_VERSION);
        assertThat(info.path("implementation").stringValue()).isEqualTo("countwright");
        assertThat(info.path("implementation_version").stringValue()).matches("\\d+\\.\\d+\\.\\d+.*");
        assertThat(info.at("/language_info/version").stringValue())
                .isEqualTo(Runtime.version().toString());
        assertThat(info.path("supported_features").toString()).isEqualTo("[\"kernel subshells\"]");
        assertThat(info.path("help_links").isArray()).isTrue();
    }

    @Test
    void execute_output_isPublishedInOrder() throws Exception {
        Message request = front.execute("print hello");
        assertThat(front.reply(request).content())
                .isEqualTo(FrontEnd.json("{'status':'ok','execution_count':1,'payload':[],'user_expressions':{}}"));
        assertThat(front.publishedTypes(request))
                .containsExactly("status", "execute_input", "stream", "stream", "status");
        List<Message> published = front.about(request, Channel.IOPUB);
        assertThat(published.get(1).content()).isEqualTo(FrontEnd.json("{'code':'print hello','execution_count':1}"));
        assertThat(published.get(2).content()).isEqualTo(FrontEnd.json("{'name':'stdout','text':'hello'}"));
        assertThat(published.get(3).content()).isEqualTo(FrontEnd.json("{'name':'stderr','text':'warned'}"));
    }

    @Test
    void execute_value_isPublishedWithItsCount() throws Exception {
        front.reply(front.execute("nothing"));
        Message request = front.execute("value 7");
        front.reply(request);
        assertThat(front.await(Channel.IOPUB, "execute_result", request).content())
                .isEqualTo(FrontEnd.json(
                        "{'execution_count':2,'data':{'text/plain':'7','text/html':'<b>7</b>'}," + "'metadata':{}}"));
    }

    @Test
    void execute_displays_carryDataMetadataAndId() throws Exception {
        Message request = front.execute("show");
        front.reply(request);
        List<Message> published = front.about(request, Channel.IOPUB);
        assertThat(front.publishedTypes(request))
                .containsExactly(
                        "status",
                        "execute_input",
                        "display_data",
                        "display_data",
                        "update_display_data",
                        "clear_output",
                        "clear_output",
                        "status");
        assertThat(published.get(2).content())
                .isEqualTo(FrontEnd.json("{'data':{'text/plain':'a picture','image/png':'AAAA'},"
                        + "'metadata':{'image/png':{'width':10}},'transient':{}}"));
        assertThat(published.get(3).content())
                .isEqualTo(FrontEnd.json("{'data':{'text/plain':'1 %','application/json':{'a':[1]}},"
                        + "'metadata':{},'transient':{'display_id':'p'}}"));
        assertThat(published.get(4).content())
                .isEqualTo(FrontEnd.json("{'data':{'text/plain':'2 %'},'metadata':{},'transient':{'display_id':'p'}}"));
        assertThat(published.get(5).content()).isEqualTo(FrontEnd.json("{'wait':true}"));
        assertThat(published.get(6).content()).isEqualTo(FrontEnd.json("{'wait':false}"));
    }

    @Test
    void execute_failure_isPublishedAndReplied() throws Exception {
        Message request = front.execute("fail it broke", "{'user_expressions':{'a':'x'}}");
        assertThat(front.reply(request).content())
                .isEqualTo(FrontEnd.json("{'status':'error','ename':'IllegalStateException','evalue':'it broke',"
                        + "'traceback':['IllegalStateException: it broke'],'execution_count':1,'payload':[],"
                        + "'user_expressions':{}}"));
        assertThat(front.await(Channel.IOPUB, "error", request).content())
                .isEqualTo(FrontEnd.json("{'ename':'IllegalStateException','evalue':'it broke',"
                        + "'traceback':['IllegalStateException: it broke']}"));
    }

    @Test
    void execute_silent_publishesNeitherCodeNorValueAndDoesNotCount() throws Exception {
        Message silent = front.execute("value 7", "{'silent':true,'store_history':true}");
        assertThat(front.reply(silent).content().path("execution_count").intValue())
                .isZero();
        assertThat(front.publishedTypes(silent)).containsExactly("status", "status");
        assertThat(history("{'hist_access_type':'tail'}")).isEqualTo("[]");
        assertThat(front.reply(front.execute("value 7"))
                        .content()
                        .path("execution_count")
                        .intValue())
                .isEqualTo(1);
    }

    @Test
    void execute_withoutHistory_showsItsValueButDoesNotCount() throws Exception {
        Message request = front.execute("value 7", "{'store_history':false}");
        assertThat(front.reply(request).content().path("execution_count").intValue())
                .isZero();
        assertThat(front.publishedTypes(request))
                .containsExactly("status", "execute_input", "execute_result", "status");
        assertThat(history("{'hist_access_type':'tail'}")).isEqualTo("[]");
    }

    @Test
    void execute_userExpressions_eachStandUnderTheirName() throws Exception {
        Message request = front.execute("nothing", "{'user_expressions':{'a':'1 + 1','b':'bad one'}}");
        assertThat(front.reply(request).content().path("user_expressions"))
                .isEqualTo(FrontEnd.json("{'a':{'status':'ok','data':{'text/plain':'= 1 + 1'},'metadata':{}},"
                        + "'b':{'status':'error','ename':'CompileError','evalue':'bad','traceback':['bad']}}"));
    }

    @Test
    void stopOnError_failure_abortsWhatWaitedAndNothingLater() throws Exception {
        Message failing = front.execute("block");
        Message second = front.execute("print second");
        Message third = front.execute("print third");
        front.await(Channel.IOPUB, "stream", failing);
        awaitAllIsReceived();
        engine.release.add("BrokenException");

        assertThat(status(front.reply(failing))).isEqualTo("error");
        Message later = front.execute("print later");
        assertThat(front.reply(second).content()).isEqualTo(FrontEnd.json("{'status':'aborted'}"));
        assertThat(status(front.reply(third))).isEqualTo("aborted");
        assertThat(front.publishedTypes(second)).containsExactly("status", "status");
        assertThat(front.reply(later).content().path("execution_count").intValue())
                .isEqualTo(2);
    }

    @Test
    void stopOnError_false_runsWhatWaited() throws Exception {
        Message failing = front.execute("block", "{'stop_on_error':false}");
        Message second = front.execute("print second");
        front.await(Channel.IOPUB, "stream", failing);
        awaitAllIsReceived();
        engine.release.add("BrokenException");
        assertThat(status(front.reply(failing))).isEqualTo("error");
        assertThat(status(front.reply(second))).isEqualTo("ok");
    }

    @Test
    void whileACellRuns_otherRequests_areAnsweredAndTheStateStaysBusy() throws Exception {
        Message running = front.execute("block");
        front.await(Channel.IOPUB, "stream", running);
        for (String type : List.of("kernel_info_request", "comm_info_request", "history_request")) {
            front.reply(front.send(Channel.SHELL, type, "{}"));
            front.reply(front.send(Channel.CONTROL, type, "{}"));
        }
        assertThat(status(front.reply(front.send(Channel.SHELL, "complete_request", "{'code':'abc'}"))))
                .isEqualTo("ok");
        assertThat(front.about(running, Channel.SHELL)).isEmpty();
        engine.release.add("go");
        assertThat(status(front.reply(running))).isEqualTo("ok");
        List<Message> published = front.about(running, Channel.IOPUB);
        assertThat(published.stream().filter(message -> message.type().equals("status")))
                .as("busy is said again after each idle of another request")
                .hasSize(1 + 7 + 1);
        assertThat(FrontEnd.state(published.get(published.size() - 1))).isEqualTo("idle");
    }

    @Test
    void interrupt_runningCell_endsItAndAnswers() throws Exception {
        Message running = front.execute("block");
        front.await(Channel.IOPUB, "stream", running);
        Message interrupt = front.send(Channel.CONTROL, "interrupt_request", "{}");
        assertThat(front.reply(interrupt).content()).isEqualTo(FrontEnd.json("{'status':'ok'}"));
        assertThat(front.reply(running).content().path("ename").stringValue()).isEqualTo("Interrupted");
    }

    @ParameterizedTest
    @EnumSource(
            value = Channel.class,
            names = {"SHELL", "CONTROL"})
    void shutdown_onEitherChannel_answersThenEnds(Channel channel) throws Exception {
        CompletableFuture<KernelServer.Ending> ending = CompletableFuture.supplyAsync(this::awaitShutdown);
        boolean restart = channel == Channel.CONTROL;
        Message running = front.execute("block");
        front.await(Channel.IOPUB, "stream", running);
        Message request = front.send(channel, "shutdown_request", "{'restart':" + restart + "}");
        assertThat(front.await(channel, "shutdown_reply", request).content())
                .isEqualTo(FrontEnd.json("{'status':'ok','restart':" + restart + "}"));
        front.await(Channel.IOPUB, "shutdown_reply", request);
        assertThat(ending.get(10, TimeUnit.SECONDS))
                .isEqualTo(restart ? KernelServer.Ending.RESTART : KernelServer.Ending.STOP);
        assertThat(engine.closed.await(10, TimeUnit.SECONDS)).isTrue();
        assertThat(status(front.reply(running))).isEqualTo("error");
    }

    @Test
    void completion_afterEmoji_countsCodePoints() throws Exception {
        var reply = front.reply(front.send(Channel.SHELL, "complete_request", "{'code':'😀😀 ab😀','cursor_pos':5}"))
                .content();
        assertThat(reply)
                .isEqualTo(FrontEnd.json("{'status':'ok','matches':['abab'],'cursor_start':3,'cursor_end':5,"
                        + "'metadata':{'_jupyter_types_experimental':[{'start':3,'end':5,'text':'abab',"
                        + "'type':'variable'}]}}"));
    }

    @Test
    void inspection_afterEmoji_countsCodePoints() throws Exception {
        var found = front.reply(front.send(
                        Channel.SHELL, "inspect_request", "{'code':'😀abc','cursor_pos':2,'detail_level':1}"))
                .content();
        assertThat(found)
                .isEqualTo(
                        FrontEnd.json("{'status':'ok','found':true,'data':{'text/plain':'😀a FULL'},'metadata':{}}"));
        var unknown = front.reply(front.send(Channel.SHELL, "inspect_request", "{'code':'unknown','cursor_pos':2}"))
                .content();
        assertThat(unknown).isEqualTo(FrontEnd.json("{'status':'ok','found':false,'data':{},'metadata':{}}"));
    }

    @ParameterizedTest
    @CsvSource({"int x,complete,''", "if (a) {,incomplete,'    '", ")(,invalid,''"})
    void isComplete_eachKind_isReported(String code, String status, String indent) throws Exception {
        var reply = front.reply(front.send(Channel.SHELL, "is_complete_request", "{'code':'" + code + "'}"))
                .content();
        assertThat(reply.path("status").stringValue()).isEqualTo(status);
        assertThat(reply.path("indent").stringValue("")).isEqualTo(indent);
    }

    @Test
    void history_eachKindOfAccess_findsItsCells() throws Exception {
        for (String code : List.of("value 1", "value [2]", "other", "value 1")) {
            front.reply(front.execute(code));
        }
        assertThat(history("{'hist_access_type':'tail','n':2}")).isEqualTo("[[1,3,'other'],[1,4,'value 1']]");
        assertThat(history("{'hist_access_type':'range','session':0,'start':2,'stop':4,'output':true}"))
                .isEqualTo("[[1,2,['value [2]','[2]']],[1,3,['other',null]]]");
        assertThat(history("{'hist_access_type':'range','session':-1,'start':1}"))
                .isEqualTo("[]");
        assertThat(history("{'hist_access_type':'search','pattern':'value*','unique':true}"))
                .isEqualTo("[[1,2,'value [2]'],[1,4,'value 1']]");
        assertThat(history("{'hist_access_type':'search','pattern':'value ?'}"))
                .isEqualTo("[[1,1,'value 1'],[1,4,'value 1']]");
        assertThat(history("{'hist_access_type':'search','pattern':'*[2]','n':5}"))
                .isEqualTo("[[1,2,'value [2]']]");
    }

    @Test
    void connect_namesAllFivePorts() throws Exception {
        var reply =
                front.reply(front.send(Channel.SHELL, "connect_request", "{}")).content();
        for (Channel channel : Channel.values()) {
            assertThat(reply.path(channel.portField()).intValue())
                    .isEqualTo(connection.ports().get(channel));
        }
    }

    @Test
    void debug_isRefusedInBothForms() throws Exception {
        var reply = front.reply(front.send(
                        Channel.CONTROL, "debug_request", "{'type':'request','seq':4,'command':'initialize'}"))
                .content();
        assertThat(reply.path("status").stringValue()).isEqualTo("error");
        assertThat(reply.path("success").booleanValue(true)).isFalse();
        assertThat(reply.path("request_seq").intValue()).isEqualTo(4);
    }

    @Test
    void payload_isTheLastOfEachSource() throws Exception {
        assertThat(front.reply(front.execute("page all"))
                        .content()
                        .path("payload")
                        .toString())
                .isEqualTo("[{\"source\":\"page\",\"data\":{\"text/plain\":\"all\",\"text/html\":\"<b>all</b>\"},"
                        + "\"start\":0},{\"source\":\"set_next_input\",\"text\":\"2 + 2\",\"replace\":false}]");
        assertThat(front.reply(front.execute("page fail"))
                        .content()
                        .path("payload")
                        .toString())
                .isEqualTo("[]");
    }

    @Test
    void unknownType_isIgnoredAndTheNextRequestIsAnswered() throws Exception {
        Message unknown = front.send(Channel.CONTROL, "unheard_of_request", "{}");
        front.reply(front.send(Channel.CONTROL, "kernel_info_request", "{}"));
        assertThat(front.about(unknown, Channel.CONTROL)).isEmpty();
        assertThat(front.about(unknown, Channel.IOPUB)).isEmpty();
    }

    @Test
    void badRequest_missingCode_namesTheField() throws Exception {
        var reply =
                front.reply(front.send(Channel.SHELL, "execute_request", "{}")).content();
        assertThat(reply.path("evalue").stringValue())
                .isEqualTo("execute_request needs text in content.code, but it is missing."
                        + " The front end should be corrected.");
    }

    private KernelServer.Ending awaitShutdown() {
        try {
            return server.awaitShutdown();
        } catch (InterruptedException e) {
            throw new IllegalStateException(e);
        }
    }

    /** A request later on the same socket is answered only after the earlier ones were put in line. */
    private void awaitAllIsReceived() throws InterruptedException {
        front.reply(front.send(Channel.SHELL, "kernel_info_request", "{}"));
    }

    private String history(String content) throws InterruptedException {
        var reply = front.reply(front.send(Channel.SHELL, "history_request", content));
        return reply.content().path("history").toString().replace('"', '\'');
    }

    private static String status(Message reply) {
        return reply.content().path("status").stringValue("");
    }
}
