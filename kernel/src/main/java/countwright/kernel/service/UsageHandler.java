package countwright.kernel.service;

import com.sun.management.OperatingSystemMXBean;
import java.io.IOException;
import java.lang.management.ManagementFactory;
import java.net.InetAddress;
import java.net.UnknownHostException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Optional;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.ObjectNode;

/**
 * Answers {@code usage_request}: memory and processor time of this kernel and of the processes it has started, summed,
 * and in {@code processes} each part by itself; then how busy the machine is. What this system does not tell is left out.
 * One request at a time.
 */
final class UsageHandler implements Handler {

    private static final Path HOST_NAME = Path.of("/proc/sys/kernel/hostname");

    private final ProcessUsage processes = new ProcessUsage();
    private final HostMemory memory = new HostMemory();
    private Optional<String> hostName = Optional.empty();
    private boolean hostLoadIsKnown;

    @Override
    public Optional<ObjectNode> answer(Request request) {
        ObjectNode reply = Replies.ok();
        reply.put("hostname", hostName());
        reply.put("pid", ProcessHandle.current().pid());
        putProcesses(reply);
        reply.put("cpu_count", Runtime.getRuntime().availableProcessors());
        putHostLoad(reply);
        ObjectNode host = Replies.object();
        memory.putInto(host);
        if (!host.isEmpty()) {
            reply.set("host_virtual_memory", host);
        }
        return Optional.of(reply);
    }

    private void putProcesses(ObjectNode reply) {
        ProcessHandle kernel = ProcessHandle.current();
        List<ProcessHandle> started = kernel.descendants().toList();
        List<ProcessUsage.Usage> all = processes.of(kernel, started);
        ProcessUsage.sum(all).putInto(reply, "kernel_cpu", "kernel_memory");
        ObjectNode parts = reply.putObject("processes");
        all.get(0).putInto(parts.putObject("kernel").put("pid", kernel.pid()), "cpu", "memory");
        if (!started.isEmpty()) {
            // The worker, and what user code started from it.
            ObjectNode worker = parts.putObject("worker");
            ArrayNode processIds = worker.putArray("pids");
            started.forEach(process -> processIds.add(process.pid()));
            ProcessUsage.sum(all.subList(1, all.size())).putInto(worker, "cpu", "memory");
        }
    }

    /** The system tells the load since the last time it was asked, so the first answer means nothing. */
    private void putHostLoad(ObjectNode reply) {
        if (ManagementFactory.getOperatingSystemMXBean() instanceof OperatingSystemMXBean system) {
            double load = system.getCpuLoad();
            if (hostLoadIsKnown && load >= 0) {
                reply.put("host_cpu_percent", ProcessUsage.percent(load));
            }
            hostLoadIsKnown = true;
        }
    }

    private String hostName() {
        String known = hostName.orElseGet(UsageHandler::findHostName);
        hostName = Optional.of(known);
        return known;
    }

    private static String findHostName() {
        try {
            return Files.readString(HOST_NAME).strip();
        } catch (IOException notLinux) {
            try {
                return InetAddress.getLocalHost().getHostName();
            } catch (UnknownHostException e) {
                return "localhost";
            }
        }
    }
}
