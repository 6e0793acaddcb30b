package countwright.kernel.service;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.OptionalLong;
import java.util.stream.Stream;
import tools.jackson.databind.node.ObjectNode;

/**
 * Memory and processor time of processes. Memory is the proportional set size, in which what several processes share is
 * split among them, or else the resident set; both are known on Linux only. Processor time is the share of one
 * processor since the last measurement (200 % are two processors kept busy), at first since the process began.
 */
final class ProcessUsage {

    private static final long SHORTEST_NANOS = 1_000_000;
    private static final long BYTES_PER_KILOBYTE = 1024;

    private Map<Long, Sample> last = new HashMap<>();

    /** What one or more processes use; each empty where this system does not tell. */
    record Usage(OptionalDouble cpuPercent, OptionalLong memoryBytes) {

        void putInto(ObjectNode target, String cpuField, String memoryField) {
            cpuPercent.ifPresent(percent -> target.put(cpuField, percent));
            memoryBytes.ifPresent(bytes -> target.put(memoryField, bytes));
        }
    }

    private record Sample(Duration used, long atNanos) {}

    /** Measures a process and others, in this order; of those that have ended meanwhile nothing is known. */
    List<Usage> of(ProcessHandle first, List<ProcessHandle> others) {
        Map<Long, Sample> now = new HashMap<>();
        List<Usage> usages = new ArrayList<>();
        Stream.concat(Stream.of(first), others.stream())
                .forEach(process -> usages.add(new Usage(cpuPercent(process, now), memoryBytes(process.pid()))));
        last = now;
        return usages;
    }

    /** Adds up what is known. */
    static Usage sum(List<Usage> parts) {
        double[] cpu = parts.stream()
                .flatMapToDouble(part -> part.cpuPercent().stream())
                .toArray();
        long[] memory = parts.stream()
                .flatMapToLong(part -> part.memoryBytes().stream())
                .toArray();
        return new Usage(
                cpu.length == 0
                        ? OptionalDouble.empty()
                        : OptionalDouble.of(Arrays.stream(cpu).sum()),
                memory.length == 0
                        ? OptionalLong.empty()
                        : OptionalLong.of(Arrays.stream(memory).sum()));
    }

    /** Returns a share as a percentage with one digit after the point. */
    static double percent(double share) {
        return Math.round(share * 1000) / 10.0;
    }

    private OptionalDouble cpuPercent(ProcessHandle process, Map<Long, Sample> now) {
        Optional<Duration> used = process.info().totalCpuDuration();
        if (used.isEmpty()) {
            return OptionalDouble.empty();
        }
        long at = System.nanoTime();
        now.put(process.pid(), new Sample(used.get(), at));
        Optional<Sample> before = Optional.ofNullable(last.get(process.pid()));
        long usedNanos =
                used.get().minus(before.map(Sample::used).orElse(Duration.ZERO)).toNanos();
        long elapsedNanos = before.map(sample -> at - sample.atNanos())
                .orElseGet(() -> process.info()
                        .startInstant()
                        .map(start -> Duration.between(start, Instant.now()).toNanos())
                        .orElse(0L));
        return elapsedNanos < SHORTEST_NANOS
                ? OptionalDouble.empty()
                : OptionalDouble.of(percent((double) Math.max(0, usedNanos) / elapsedNanos));
    }

    private static OptionalLong memoryBytes(long processId) {
        Path folder = Path.of("/proc", Long.toString(processId));
        OptionalLong shared = kilobytes(folder.resolve("smaps_rollup"), "Pss:");
        OptionalLong found = shared.isPresent() ? shared : kilobytes(folder.resolve("status"), "VmRSS:");
        return found.isPresent() ? OptionalLong.of(found.getAsLong() * BYTES_PER_KILOBYTE) : OptionalLong.empty();
    }

    /** Finds a line such as {@code Pss: 12 kB}. */
    static OptionalLong kilobytes(Path file, String label) {
        try (Stream<String> lines = Files.lines(file)) {
            return lines.filter(line -> line.startsWith(label))
                    .map(line -> line.substring(label.length()).strip().split("\\s+", -1)[0])
                    .filter(number -> number.matches("[0-9]{1,18}"))
                    .mapToLong(Long::parseLong)
                    .findFirst();
        } catch (IOException | UncheckedIOException notTold) {
            return OptionalLong.empty();
        }
    }
}
