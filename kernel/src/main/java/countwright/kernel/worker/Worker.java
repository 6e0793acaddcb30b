package countwright.kernel.worker;

import countwright.worker.Frame;
import countwright.worker.FrameStream;
import countwright.worker.WorkerMain;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.net.Socket;
import java.nio.charset.StandardCharsets;
import java.security.SecureRandom;
import java.time.Duration;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.List;
import java.util.Map;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.atomic.AtomicReference;
import org.jspecify.annotations.Nullable;

/**
 * A running worker process and the stream to it.
 *
 * <p>One thread at a time makes requests and waits for their replies; interrupts and answers to questions may come from
 * any thread. When the process is lost, for whatever reason, a waiting request fails with the cause.
 */
public final class Worker implements AutoCloseable {

    private static final Logger LOG = System.getLogger(Worker.class.getName());
    private static final int CONNECT_MILLIS = 30_000;
    private static final int HANDSHAKE_MILLIS = 5_000;
    private static final long EXIT_STATUS_MILLIS = 3_000;

    private final Process process;
    private final Socket socket;
    private final FrameStream stream;
    private final WorkerListener listener;
    private final Interrupter interrupter;
    private final AtomicReference<@Nullable CompletableFuture<Frame.Reply>> waiting = new AtomicReference<>();
    private final CompletableFuture<String> loss = new CompletableFuture<>();
    private final boolean recordsClasses;
    private volatile boolean leaving;

    private record Connection(Socket socket, FrameStream stream) {}

    private Worker(
            Process process,
            Connection connection,
            Debugger debugger,
            WorkerListener listener,
            WorkerSettings settings) {
        this.recordsClasses = settings.recordsClasses();
        this.process = process;
        this.socket = connection.socket();
        this.stream = connection.stream();
        this.listener = listener;
        this.interrupter = new Interrupter(this, debugger, listener::processSaid);
    }

    /**
     * Starts a worker and waits until it is connected.
     *
     * @throws IOException if it cannot be started or does not connect, with what it said
     */
    public static Worker start(WorkerSettings settings, WorkerListener listener) throws IOException {
        Debugger debugger = Debugger.listen();
        try (ServerSocket server = new ServerSocket(0, 1, InetAddress.getLoopbackAddress())) {
            // What is on its way stands before the reply to an interrupt; the system would let megabytes be there.
            server.setReceiveBufferSize(WorkerMain.STREAM_BUFFER);
            Process process = spawn(settings, debugger);
            if (!settings.recordsClasses()) {
                debugger.attachBehind();
            }
            // A worker that dies at birth never connects.
            var unused = process.onExit().thenRun(() -> closeQuietly(server));
            ProcessOutput output = new ProcessOutput(process.getInputStream(), listener);
            try {
                String token = newToken();
                tell(process, server.getLocalPort() + " " + token + "\n");
                Worker worker = new Worker(process, accept(server, token), debugger, listener, settings);
                Thread reader = new Thread(worker::readForever, "from worker");
                reader.setDaemon(true);
                reader.start();
                return worker;
            } catch (IOException e) {
                process.destroyForcibly();
                throw new IOException("the worker did not start. It said: " + output.lastWords(), e);
            }
        } catch (IOException | RuntimeException e) {
            debugger.close();
            throw e;
        }
    }

    /**
     * Sends a request and waits for its reply, however long it takes.
     *
     * @throws WorkerLostException if the worker is gone, or goes before it has replied
     */
    public Frame.Reply request(Frame.Request request) throws WorkerLostException {
        CompletableFuture<Frame.Reply> reply = new CompletableFuture<>();
        waiting.set(reply);
        try {
            if (loss.isDone()) {
                throw new WorkerLostException(loss.join());
            }
            send(request);
            return reply.get();
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new WorkerLostException("the kernel is closing");
        } catch (ExecutionException e) {
            throw new WorkerLostException(loss.join());
        } finally {
            waiting.set(null);
        }
    }

    /** Sends a frame that has no reply; does nothing if the worker is gone. */
    public void send(Frame.ToWorker frame) {
        synchronized (stream) {
            try {
                stream.write(frame);
                stream.flush();
            } catch (IOException e) {
                // The reading thread sees the same end and reports it with its cause.
                LOG.log(Level.DEBUG, "the worker does not take frames any more");
            }
        }
    }

    /** Says that a cell starts, so that an interrupt has something to stop; and how many lost cells it could restore. */
    public void cellStarted(int restorable) {
        interrupter.cellStarted();
        send(new Frame.CellStarted(restorable));
    }

    /** Says that the cell is over. */
    public void cellEnded() {
        interrupter.cellEnded();
    }

    /**
     * Asks the running cell to stop: by interrupt at once, by force a moment later; a second call while the first has
     * not helped ends the worker. Returns at once.
     */
    public void interrupt() {
        interrupter.interrupt();
    }

    /** Returns the process id. */
    public long processId() {
        return process.pid();
    }

    /** Completes when the worker is gone, with a sentence that says how. */
    public CompletableFuture<String> loss() {
        return loss.copy();
    }

    /** Ends the worker within the given time; one that writes down its classes is left to do so. */
    public void close(Duration patience) {
        leaving = true;
        if (recordsClasses) {
            send(new Frame.Leave());
            return;
        }
        interrupter.close();
        // By another thread, since a worker that does not read can hold up the sending.
        CompletableFuture.delayedExecutor(patience.toMillis(), TimeUnit.MILLISECONDS)
                .execute(process::destroyForcibly);
        send(new Frame.Leave());
        try {
            if (!process.waitFor(patience.toMillis(), TimeUnit.MILLISECONDS)) {
                process.destroyForcibly();
            }
        } catch (InterruptedException e) {
            process.destroyForcibly();
            Thread.currentThread().interrupt();
        }
        closeQuietly(socket);
    }

    @Override
    public void close() {
        close(Duration.ofSeconds(1));
    }

    /** Kills the process because what runs in it cannot be stopped otherwise. */
    void kill() {
        process.destroyForcibly();
    }

    private void readForever() {
        try {
            while (true) {
                Frame frame = stream.read();
                if (frame instanceof Frame.Reply reply) {
                    CompletableFuture<Frame.Reply> request = waiting.get();
                    if (request != null) {
                        request.complete(reply);
                    }
                } else if (frame instanceof Frame.ToKernel said) {
                    passOn(said);
                } else {
                    throw new IOException("damaged stream: the worker sent a frame of the kernel's");
                }
            }
        } catch (IOException | RuntimeException | Error end) {
            // Whatever it was, nothing reads the replies any more, so nobody may go on waiting for one.
            lose(end);
        }
    }

    private void passOn(Frame.ToKernel said) {
        try {
            listener.said(said);
        } catch (RuntimeException e) {
            LOG.log(Level.ERROR, "Something the worker said could not be passed on; the next will be.", e);
        }
    }

    private void lose(Throwable end) {
        String how = describeLoss();
        if (!leaving) {
            // As text, since the logger would put a thousands separator into the process id.
            LOG.log(Level.INFO, "worker {0} lost: {1}", Long.toString(process.pid()), how);
            LOG.log(Level.DEBUG, "how its stream ended", end);
        }
        interrupter.close();
        closeQuietly(socket);
        loss.complete(how);
        CompletableFuture<Frame.Reply> request = waiting.get();
        if (request != null) {
            var unused = request.completeExceptionally(new WorkerLostException(how));
        }
    }

    private String describeLoss() {
        try {
            if (!process.waitFor(EXIT_STATUS_MILLIS, TimeUnit.MILLISECONDS)) {
                process.destroyForcibly();
                return "its stream to the kernel broke";
            }
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            return "the kernel is closing";
        }
        int status = process.exitValue();
        if (leaving) {
            return "the kernel has ended it";
        }
        if (interrupter.hasKilled()) {
            return "it did not react to the interrupt and was ended on the second one";
        }
        return switch (status) {
            case WorkerMain.LOST_KERNEL -> "its stream to the kernel was closed from inside";
            case WorkerMain.OUT_OF_MEMORY -> "its memory was so full that it could not go on";
            case 128 + 9 -> "it was killed from outside (signal 9), as the system does when memory runs out";
            case 128 + 6, 128 + 11, 128 + 4, 128 + 7, 128 + 8 ->
                "its JVM crashed in native code (signal " + (status - 128) + ")";
            case 128 + 15 -> "it was asked to end from outside (signal 15)";
            default -> "its JVM exited with status " + status + ", as System.exit(" + status + ") does";
        };
    }

    private static Process spawn(WorkerSettings settings, Debugger debugger) throws IOException {
        List<String> command = new ArrayList<>();
        command.add(ProcessHandle.current().info().command().orElse(javaOfThisJvm()));
        if (settings.recordsClasses()) {
            command.add("-D" + WorkerMain.RECORDS_CLASSES + "=true");
        } else {
            command.add("-agentlib:jdwp=transport=dt_socket,server=n,suspend=n,address=" + debugger.address());
        }
        command.add("-Djava.awt.headless=true");
        command.add("-Dfile.encoding=UTF-8");
        // On JDK 22 to 24 System.console() would be there and read nothing; with this it is null, as on all others.
        command.add("-Djdk.console=java.base");
        command.add("-Xshare:auto");
        // Exceptions thrown often would lose their traces, and with them the line in the cell.
        command.add("-XX:-OmitStackTraceInFastThrow");
        if (Runtime.version().feature() >= 24) {
            // The database engine loads its native part; without this the JVM warns into the user's cell.
            command.add("--enable-native-access=ALL-UNNAMED");
        }
        command.addAll(settings.jvmOptions());
        command.add("-cp");
        command.add(settings.classPathText());
        command.add(WorkerMain.class.getName());
        ProcessBuilder builder = new ProcessBuilder(command).redirectErrorStream(true);
        Map<String, String> environment = builder.environment();
        // Options meant for the kernel would be announced by the worker's JVM into the user's first cell.
        environment.remove("JAVA_TOOL_OPTIONS");
        environment.remove("JDK_JAVA_OPTIONS");
        environment.putAll(settings.environment());
        return builder.start();
    }

    private static String javaOfThisJvm() {
        return System.getProperty("java.home") + "/bin/java";
    }

    private static void tell(Process process, String line) {
        try (OutputStream stdin = process.getOutputStream()) {
            stdin.write(line.getBytes(StandardCharsets.US_ASCII));
        } catch (IOException alreadyGone) {
            LOG.log(Level.DEBUG, "the worker is gone before it was told anything; it will not connect");
        }
    }

    /** Waits for the connection that knows the token: any program on this machine can reach the port. */
    private static Connection accept(ServerSocket server, String token) throws IOException {
        long deadline = System.nanoTime() + TimeUnit.MILLISECONDS.toNanos(CONNECT_MILLIS);
        while (true) {
            long left = TimeUnit.NANOSECONDS.toMillis(deadline - System.nanoTime());
            server.setSoTimeout((int) Math.max(1, left));
            Socket socket = server.accept();
            try {
                socket.setSoTimeout(HANDSHAKE_MILLIS);
                FrameStream stream = new FrameStream(socket.getInputStream(), socket.getOutputStream());
                if (stream.read() instanceof Frame.Ready ready && ready.token().equals(token)) {
                    socket.setSoTimeout(0);
                    socket.setTcpNoDelay(true);
                    return new Connection(socket, stream);
                }
            } catch (IOException e) {
                LOG.log(Level.DEBUG, "a connection that does not speak as the worker does", e);
            }
            closeQuietly(socket);
        }
    }

    private static String newToken() {
        byte[] token = new byte[16];
        new SecureRandom().nextBytes(token);
        return HexFormat.of().formatHex(token);
    }

    private static void closeQuietly(AutoCloseable resource) {
        try {
            resource.close();
        } catch (Exception e) {
            LOG.log(Level.DEBUG, "closing failed", e);
        }
    }

    /** Passes on what the process itself prints, and remembers the end of it for reports. */
    private static final class ProcessOutput {

        private static final int REMEMBERED = 4_000;

        private final StringBuilder tail = new StringBuilder();
        private final Thread thread;

        ProcessOutput(InputStream in, WorkerListener listener) {
            thread = new Thread(() -> pass(in, listener), "worker process output");
            thread.setDaemon(true);
            thread.start();
        }

        String lastWords() {
            try {
                thread.join(1_000);
            } catch (InterruptedException e) {
                Thread.currentThread().interrupt();
            }
            synchronized (tail) {
                return tail.isEmpty() ? "(nothing)" : tail.toString().strip();
            }
        }

        private void pass(InputStream in, WorkerListener listener) {
            byte[] buffer = new byte[8192];
            try (in) {
                for (int count = in.read(buffer); count >= 0; count = in.read(buffer)) {
                    String text = new String(buffer, 0, count, StandardCharsets.UTF_8);
                    synchronized (tail) {
                        tail.append(text);
                        if (tail.length() > REMEMBERED) {
                            tail.delete(0, tail.length() - REMEMBERED);
                        }
                    }
                    listener.processSaid(text);
                }
            } catch (IOException e) {
                LOG.log(Level.DEBUG, "the worker''s output ended");
            }
        }
    }
}
