package countwright.kernel.desk;

import java.io.BufferedReader;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Map;
import java.util.concurrent.TimeUnit;
import java.util.stream.Stream;

/** A kernel started as a child of this process, which does not outlive it. */
final class KernelProcess implements AutoCloseable {

    private static final int LINES_KEPT = 40;
    private static final Duration PATIENCE = Duration.ofSeconds(3);

    private final Process process;
    private final Thread reader;
    private final Thread atExit;
    private final Deque<String> lastLines = new ArrayDeque<>();

    private KernelProcess(Process process) {
        this.process = process;
        this.reader = new Thread(this::keepLastLines, "kernel-log");
        this.atExit = new Thread(this::kill, "kernel-end");
    }

    /**
     * Starts a kernel.
     *
     * @param folder its working folder
     * @throws DeskException if it cannot be started
     */
    static KernelProcess start(KernelCommand command, Path connectionFile, Path folder) {
        return start(command, connectionFile, folder, Map.of());
    }

    /** Starts a kernel with more in its environment. */
    static KernelProcess start(
            KernelCommand command, Path connectionFile, Path folder, Map<String, String> environment) {
        ProcessBuilder builder = new ProcessBuilder(command.with(connectionFile))
                .directory(folder.toFile())
                .redirectErrorStream(true);
        // The protocol's own way to let a kernel notice that the front end has gone without a word.
        builder.environment()
                .put("JPY_PARENT_PID", Long.toString(ProcessHandle.current().pid()));
        // A run from the command line is nothing its user has typed.
        builder.environment().put("COUNTWRIGHT_HISTORY", "off");
        builder.environment().putAll(environment);
        KernelProcess started;
        try {
            started = new KernelProcess(builder.start());
            started.process.getOutputStream().close();
        } catch (IOException e) {
            throw new DeskException("the kernel could not be started with " + command + ": " + e.getMessage(), e);
        }
        started.reader.setDaemon(true);
        started.reader.start();
        Runtime.getRuntime().addShutdownHook(started.atExit);
        return started;
    }

    long processId() {
        return process.pid();
    }

    /** Returns what it has started itself. */
    Stream<ProcessHandle> children() {
        return process.children();
    }

    boolean isAlive() {
        return process.isAlive();
    }

    /** Returns how the kernel ended and the last it wrote to its terminal, for an error message. */
    String lastWords() {
        String end = process.isAlive() ? "It is still running." : "Its exit code was " + process.exitValue() + ".";
        try {
            reader.join(500);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
        synchronized (lastLines) {
            return lastLines.isEmpty()
                    ? end + " It wrote nothing."
                    : end + " Its last lines were:\n  " + String.join("\n  ", lastLines);
        }
    }

    /** Waits for the kernel to end by itself and says whether it did. */
    boolean endsWithin(Duration limit) {
        try {
            return process.waitFor(limit.toMillis(), TimeUnit.MILLISECONDS);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            return false;
        }
    }

    /** Ends the kernel and whatever it started: asked first, then forced. */
    @Override
    public void close() {
        kill();
        try {
            Runtime.getRuntime().removeShutdownHook(atExit);
        } catch (IllegalStateException e) {
            // This process is ending already, and the hook with it.
        }
    }

    private void kill() {
        List<ProcessHandle> family = new ArrayList<>(process.descendants().toList());
        process.destroy();
        if (!endsWithin(PATIENCE)) {
            process.destroyForcibly();
        }
        family.forEach(ProcessHandle::destroyForcibly);
    }

    private void keepLastLines() {
        try (BufferedReader lines = process.inputReader(StandardCharsets.UTF_8)) {
            for (String line = lines.readLine(); line != null; line = lines.readLine()) {
                synchronized (lastLines) {
                    lastLines.addLast(line);
                    if (lastLines.size() > LINES_KEPT) {
                        lastLines.removeFirst();
                    }
                }
            }
        } catch (IOException e) {
            // The stream ends with the kernel.
        }
    }
}
