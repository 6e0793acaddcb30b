package countwright.worker;

import countwright.show.Show;
import countwright.show.WarmUp;
import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStreamReader;
import java.net.InetAddress;
import java.net.Socket;
import java.nio.charset.StandardCharsets;
import java.util.ServiceLoader;

/**
 * The worker's entry point. The kernel writes one line to standard input: the loopback port to connect to and a token
 * that proves who connected, neither of which shows in the list of processes.
 */
public final class WorkerMain {

    /** Exit status when memory is so full that this process cannot even talk to the kernel. */
    public static final int OUT_OF_MEMORY = 87;

    /** Bytes of either end's buffer of the stream between worker and kernel. */
    public static final int STREAM_BUFFER = 256 << 10;

    /** Exit status when the kernel has gone. */
    public static final int LOST_KERNEL = 86;

    /** Loading native parts must not compete with the first cells, so it waits until none has run for so long. */
    private static final long IDLE_MILLIS = 1_000;

    private static final long LAST_WORDS_MILLIS = 500;

    /** The system property by which the kernel says that this JVM writes a class-data archive when it ends. */
    public static final String RECORDS_CLASSES = "countwright.records.classes";

    private WorkerMain() {}

    public static void main(String[] arguments) throws IOException {
        String line = new BufferedReader(new InputStreamReader(System.in, StandardCharsets.US_ASCII)).readLine();
        if (line == null || line.indexOf(' ') < 0) {
            throw new IOException("the worker is started by the kernel, not by hand");
        }
        int space = line.indexOf(' ');
        int port = Integer.parseInt(line.substring(0, space));
        String token = line.substring(space + 1);
        try (Socket socket = new Socket(InetAddress.getLoopbackAddress(), port)) {
            // Without this the two sides wait for each other's delayed acknowledgements, some 190 ms a snippet.
            socket.setTcpNoDelay(true);
            socket.setSendBufferSize(STREAM_BUFFER);
            serve(new FrameStream(socket.getInputStream(), socket.getOutputStream()), token);
        } finally {
            exit();
        }
    }

    private static void serve(FrameStream stream, String token) {
        Outbox outbox = new Outbox(stream);
        StageChannel stage = new StageChannel(outbox);
        CellThread cells = new CellThread(outbox);
        outbox.start();
        outbox.put(new Frame.Ready(token, ProcessHandle.current().pid()));
        StandardStreams streams = new StandardStreams(outbox, stage);
        streams.putInPlace();
        Show.onto(stage);
        Thread.setDefaultUncaughtExceptionHandler(WorkerMain::reportEnd);
        cells.start();
        CommThread comms = new CommThread(outbox);
        comms.start();
        Runtime.getRuntime().addShutdownHook(new Thread(() -> sayLastWords(outbox), "last words"));
        startWarmUp(cells);
        try {
            while (true) {
                Frame frame = stream.read();
                if (frame instanceof Frame.Request request) {
                    cells.accept(request);
                } else if (frame instanceof Frame.CommReceived received) {
                    comms.accept(received);
                } else if (frame instanceof Frame.InterruptHandler) {
                    comms.interruptHandler();
                } else if (frame instanceof Frame.Interrupt) {
                    cells.interrupt();
                } else if (frame instanceof Frame.CellStarted started) {
                    // What a cell redirects is its own affair, and must not silence the next.
                    streams.putInPlace();
                    Show.onto(stage);
                    stage.restorable(started.restorable());
                } else if (frame instanceof Frame.StopWhenSpeaking) {
                    CellThread.stopWhenSpeaking();
                } else if (frame instanceof Frame.CloseAwaited) {
                    cells.closeAwaited();
                } else if (frame instanceof Frame.Answer answer) {
                    stage.reply(answer.question(), answer);
                } else if (frame instanceof Frame.Refuse refuse) {
                    stage.reply(refuse.question(), refuse);
                } else if (frame instanceof Frame.Leave) {
                    return;
                }
            }
        } catch (IOException kernelGone) {
            return;
        } catch (OutOfMemoryError full) {
            Runtime.getRuntime().halt(OUT_OF_MEMORY);
        }
    }

    /** As the JVM does, but a thread that was stopped with its cell needs no report. */
    private static void reportEnd(Thread thread, Throwable thrown) {
        if (!(thrown instanceof CellStop)) {
            System.err.print("Exception in thread \"" + thread.getName() + "\" ");
            thrown.printStackTrace();
        }
    }

    /** What a cell printed before System.exit still reaches the notebook. */
    private static void sayLastWords(Outbox outbox) {
        System.out.flush();
        System.err.flush();
        try {
            outbox.drain(LAST_WORDS_MILLIS);
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        }
    }

    private static void startWarmUp(CellThread cells) {
        Thread warming = new Thread(
                () -> {
                    try {
                        do {
                            Thread.sleep(IDLE_MILLIS);
                        } while (!cells.hasRested(IDLE_MILLIS));
                        ServiceLoader.load(WarmUp.class).forEach(WarmUp::warmUp);
                    } catch (InterruptedException | RuntimeException | Error e) {
                        // The real use comes later and reports better.
                        return;
                    }
                },
                "warm-up");
        warming.setDaemon(true);
        warming.start();
    }

    /** Leaves even if user code blocks the orderly way; a JVM that writes down its classes at exit is given the time. */
    private static void exit() {
        if (Boolean.getBoolean(RECORDS_CLASSES)) {
            System.exit(0);
        }
        Thread last = new Thread(
                () -> {
                    try {
                        Thread.sleep(LAST_WORDS_MILLIS);
                    } catch (InterruptedException e) {
                        Thread.currentThread().interrupt();
                    }
                    Runtime.getRuntime().halt(0);
                },
                "exit");
        last.setDaemon(true);
        last.start();
        System.exit(0);
    }
}
