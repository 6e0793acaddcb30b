package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import countwright.kernel.wire.Message;
import java.util.concurrent.CompletableFuture;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

/** An engine that takes its time to start, or never does. */
@Timeout(30)
class SlowEngineTest {

    private final ConnectionFile connection = ConnectionFile.create("countwright");
    private final CompletableFuture<FakeEngine> coming = new CompletableFuture<>();

    @Test
    void engineStillStarting_kernelInfoIsAnsweredAndTheCellWaits() throws Exception {
        try (KernelServer server = KernelServer.start(connection, coming::join);
                FrontEnd front = new FrontEnd(connection)) {
            Message cell = front.execute("value 7");
            front.await(Channel.IOPUB, "execute_input", cell);
            front.reply(front.send(Channel.SHELL, "kernel_info_request", "{}"));
            assertThat(front.about(cell, Channel.SHELL)).isEmpty();
            coming.complete(new FakeEngine());
            assertThat(front.reply(cell).content().path("status").stringValue()).isEqualTo("ok");
            assertThat(server).isNotNull();
        }
    }

    @Test
    void engineStillStarting_interruptEndsTheWait() throws Exception {
        try (KernelServer server = KernelServer.start(connection, coming::join);
                FrontEnd front = new FrontEnd(connection)) {
            Message cell = front.execute("value 7");
            front.await(Channel.IOPUB, "execute_input", cell);
            front.reply(front.send(Channel.CONTROL, "interrupt_request", "{}"));
            assertThat(front.reply(cell).content().path("evalue").stringValue()).contains("before it began");
            coming.complete(new FakeEngine());
            assertThat(front.reply(front.execute("value 7"))
                            .content()
                            .path("status")
                            .stringValue())
                    .isEqualTo("ok");
            assertThat(server).isNotNull();
        }
    }

    @Test
    void engineFailsToStart_cellsSayWhy() throws Exception {
        coming.completeExceptionally(new IllegalStateException("no java here."));
        try (KernelServer server = KernelServer.start(connection, coming::join);
                FrontEnd front = new FrontEnd(connection)) {
            var reply = front.reply(front.execute("value 7")).content();
            assertThat(reply.path("ename").stringValue()).isEqualTo("WorkerStartError");
            assertThat(reply.path("evalue").stringValue()).contains("no java here.");
            assertThat(server).isNotNull();
        }
    }
}
