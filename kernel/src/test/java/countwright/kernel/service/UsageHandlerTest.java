package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.wire.Channel;
import countwright.kernel.wire.ConnectionFile;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;

@Timeout(30)
class UsageHandlerTest {

    private final ConnectionFile connection = ConnectionFile.create("countwright");

    @Test
    @EnabledOnOs(value = OS.LINUX, disabledReason = "other systems tell less")
    void usage_isThatOfThisProcess_andGrowsWithIt() throws Exception {
        try (KernelServer server = KernelServer.start(connection, FakeEngine::new);
                FrontEnd front = new FrontEnd(connection)) {
            var before = usage(front);
            byte[] large = new byte[200 << 20];
            java.util.Arrays.fill(large, (byte) 1);
            burn();
            var after = usage(front);

            assertThat(before.path("pid").longValue())
                    .isEqualTo(ProcessHandle.current().pid());
            assertThat(before.path("hostname").stringValue()).isNotBlank();
            assertThat(before.path("cpu_count").intValue()).isPositive();
            assertThat(before.path("host_virtual_memory").path("total").longValue())
                    .isGreaterThan(before.path("kernel_memory").longValue());
            assertThat(after.path("kernel_memory").longValue()
                            - before.path("kernel_memory").longValue())
                    .as("growth after an array of %d MB", large.length >> 20)
                    .isGreaterThan(100L << 20);
            assertThat(after.path("kernel_cpu").doubleValue()).isGreaterThan(1);
            assertThat(after.path("host_cpu_percent").isNumber()).isTrue();
            assertThat(server).isNotNull();
        }
    }

    private static tools.jackson.databind.node.ObjectNode usage(FrontEnd front) throws InterruptedException {
        return front.reply(front.send(Channel.CONTROL, "usage_request", "{}")).content();
    }

    /** Keeps a processor busy for a while of its own time, not of the clock's. */
    private static void burn() {
        var threads = java.lang.management.ManagementFactory.getThreadMXBean();
        long end = threads.getCurrentThreadCpuTime() + 300_000_000L;
        while (threads.getCurrentThreadCpuTime() < end) {
            Thread.onSpinWait();
        }
    }
}
