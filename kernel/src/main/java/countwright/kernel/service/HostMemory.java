package countwright.kernel.service;

import com.sun.management.OperatingSystemMXBean;
import java.lang.management.ManagementFactory;
import java.nio.file.Path;
import java.util.OptionalLong;
import tools.jackson.databind.node.ObjectNode;

/** The memory of the machine, in bytes, under the names that the reference kernel uses. */
final class HostMemory {

    private static final Path MEMINFO = Path.of("/proc/meminfo");
    private static final long BYTES_PER_KILOBYTE = 1024;

    void putInto(ObjectNode target) {
        OptionalLong total = bytes("MemTotal:");
        OptionalLong available = bytes("MemAvailable:");
        if (total.isPresent() && available.isPresent()) {
            target.put("total", total.getAsLong());
            target.put("available", available.getAsLong());
            target.put("percent", ProcessUsage.percent(1 - (double) available.getAsLong() / total.getAsLong()));
            target.put("used", total.getAsLong() - available.getAsLong());
            bytes("MemFree:").ifPresent(free -> target.put("free", free));
            bytes("Active:").ifPresent(active -> target.put("active", active));
            bytes("Inactive:").ifPresent(inactive -> target.put("inactive", inactive));
            bytes("Buffers:").ifPresent(buffers -> target.put("buffers", buffers));
            bytes("Cached:").ifPresent(cached -> target.put("cached", cached));
        } else if (ManagementFactory.getOperatingSystemMXBean() instanceof OperatingSystemMXBean system) {
            // Elsewhere Java tells these two; what could be freed for use is not among them.
            target.put("total", system.getTotalMemorySize());
            target.put("free", system.getFreeMemorySize());
        }
    }

    private static OptionalLong bytes(String label) {
        OptionalLong kilobytes = ProcessUsage.kilobytes(MEMINFO, label);
        return kilobytes.isPresent()
                ? OptionalLong.of(kilobytes.getAsLong() * BYTES_PER_KILOBYTE)
                : OptionalLong.empty();
    }
}
