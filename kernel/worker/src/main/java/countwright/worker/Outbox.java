package countwright.worker;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Objects;
import org.jspecify.annotations.Nullable;

/**
 * Everything the worker says, in the order it was said, written to the stream by one thread.
 *
 * <p>Threads of user code never touch the stream: one stopped in the middle of a frame would break it. Output that piles
 * up while the writer is busy is merged, so a flood of lines becomes few large frames. Who prints or shows waits while
 * {@link #MOST_PENDING} bytes of output or {@link #MOST_FRAMES} frames are under way, which bounds the memory.
 */
final class Outbox {

    private static final int MOST_PENDING = 1 << 20;
    private static final int MOST_FRAMES = 200;
    private static final int LARGEST_PIECE = 512 << 10;

    /** Output that follows output is gathered for so long, or until it is so much, unless something else stands behind it. */
    private static final long GATHER_NANOS = 25_000_000;

    private static final int GATHERED_BYTES = 256 << 10;

    private final Object lock = new Object();
    private final FrameStream stream;
    private final Deque<Frame> frames = new ArrayDeque<>();
    private final ByteArrayOutputStream output = new ByteArrayOutputStream();
    private Frame.@Nullable Channel outputChannel;
    private long outputMessage = CommThread.NONE;
    private boolean writing;
    private int draining;
    private long gatheredUntil = System.nanoTime();

    Outbox(FrameStream stream) {
        this.stream = stream;
    }

    void start() {
        Thread writer = new Thread(this::writeForever, "to kernel");
        writer.setDaemon(true);
        writer.start();
    }

    /** Queues a frame behind everything said before. */
    void put(Frame frame) {
        int before = CellThread.guard();
        try {
            synchronized (lock) {
                closeOutput();
                frames.add(frame);
                lock.notifyAll();
            }
        } finally {
            CellThread.unguard(before);
        }
    }

    /** Queues an event that user code caused, waiting while too much is under way. */
    void putWhenRoom(Frame.Event event) {
        waitForRoom();
        put(told(CommThread.messageBeingHandled(), event));
    }

    /** Queues output, waiting while too much is under way; a long one goes in pieces, since a frame has a limit. */
    void putOutput(Frame.Channel channel, byte[] bytes, int start, int length) {
        Objects.checkFromIndexSize(start, length, bytes.length);
        int end = start + length;
        for (int from = start; from < end; from += LARGEST_PIECE) {
            waitForRoom();
            append(channel, bytes, from, Math.min(LARGEST_PIECE, end - from));
        }
    }

    private void append(Frame.Channel channel, byte[] bytes, int start, int length) {
        int before = CellThread.guard();
        try {
            synchronized (lock) {
                int size = output.size();
                if (frames.isEmpty() && (size == 0 || (size < GATHERED_BYTES && size + length >= GATHERED_BYTES))) {
                    // Only then can the writer be waiting for something to write; a flood should not wake it each time.
                    lock.notifyAll();
                }
                long message = CommThread.messageBeingHandled();
                if (outputChannel != channel || outputMessage != message) {
                    closeOutput();
                    outputChannel = channel;
                    outputMessage = message;
                }
                output.write(bytes, start, length);
            }
        } finally {
            CellThread.unguard(before);
        }
    }

    /** Waits until everything said so far is on its way, but no longer than the given time. */
    void drain(long millis) throws InterruptedException {
        long deadline = System.nanoTime() + millis * 1_000_000;
        synchronized (lock) {
            draining++;
            lock.notifyAll();
            try {
                while (writing || !frames.isEmpty() || output.size() > 0) {
                    long left = (deadline - System.nanoTime()) / 1_000_000;
                    if (left <= 0) {
                        return;
                    }
                    lock.wait(left);
                }
            } finally {
                draining--;
            }
        }
    }

    /**
     * An interrupt does not end the wait, which the writer always ends soon: print streams swallow the exception there
     * would be, and with it the text. A stop ends it.
     */
    private void waitForRoom() {
        CellThread.stopIfAsked();
        boolean interrupted = false;
        try {
            synchronized (lock) {
                while (output.size() > MOST_PENDING || frames.size() > MOST_FRAMES) {
                    try {
                        lock.wait();
                    } catch (InterruptedException e) {
                        interrupted = true;
                    }
                }
            }
        } finally {
            if (interrupted) {
                Thread.currentThread().interrupt();
            }
        }
    }

    private void closeOutput() {
        if (output.size() > 0 && outputChannel != null) {
            frames.add(told(outputMessage, new Frame.Output(outputChannel, Bytes.keeping(output.toByteArray()))));
            output.reset();
        }
        outputChannel = null;
    }

    private static Frame told(long message, Frame.Event event) {
        return message == CommThread.NONE ? event : new Frame.Aside(message, event);
    }

    private void writeForever() {
        try {
            while (true) {
                for (Frame frame : takeAll()) {
                    stream.write(frame);
                }
                stream.flush();
                synchronized (lock) {
                    writing = false;
                    lock.notifyAll();
                }
            }
        } catch (OutOfMemoryError full) {
            Runtime.getRuntime().halt(WorkerMain.OUT_OF_MEMORY);
        } catch (IOException | RuntimeException | Error kernelGone) {
            // Without a way to speak this process is of no use to anyone.
            Runtime.getRuntime().halt(WorkerMain.LOST_KERNEL);
        }
    }

    private List<Frame> takeAll() {
        synchronized (lock) {
            while (frames.isEmpty() && output.size() == 0) {
                waitUninterrupted(0);
            }
            long left = (gatheredUntil - System.nanoTime()) / 1_000_000;
            while (left > 0 && draining == 0 && frames.isEmpty() && output.size() < GATHERED_BYTES) {
                waitUninterrupted(left);
                left = (gatheredUntil - System.nanoTime()) / 1_000_000;
            }
            gatheredUntil = System.nanoTime() + GATHER_NANOS;
            closeOutput();
            List<Frame> taken = new ArrayList<>(frames);
            frames.clear();
            writing = true;
            lock.notifyAll();
            return taken;
        }
    }

    /** A cell may interrupt every thread it finds; the writer has no reason to end. */
    @SuppressWarnings("WaitNotInLoop") // Both callers wait in one.
    private void waitUninterrupted(long millis) {
        try {
            lock.wait(millis);
        } catch (InterruptedException byUserCode) {
            return;
        }
    }
}
