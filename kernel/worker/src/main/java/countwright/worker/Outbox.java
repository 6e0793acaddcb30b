package countwright.worker;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InterruptedIOException;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Everything the worker says, in the order it was said, written to the stream by one thread.
 *
 * <p>Threads of user code never touch the stream: one stopped in the middle of a frame would break it. Output that piles
 * up while the writer is busy is merged, so a flood of lines becomes few large frames, and a writer of output waits
 * once {@link #MOST_PENDING} bytes are under way, which bounds the memory.
 */
final class Outbox {

    private static final int MOST_PENDING = 4 << 20;

    private final Object lock = new Object();
    private final FrameStream stream;
    private final Deque<Frame> frames = new ArrayDeque<>();
    private final ByteArrayOutputStream output = new ByteArrayOutputStream();
    private Frame.@Nullable Channel outputChannel;
    private boolean writing;

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

    /** Queues output, waiting while too much of it is under way. */
    void putOutput(Frame.Channel channel, byte[] bytes, int start, int length) throws InterruptedIOException {
        waitForRoom();
        int before = CellThread.guard();
        try {
            synchronized (lock) {
                if (outputChannel != channel) {
                    closeOutput();
                    outputChannel = channel;
                }
                output.write(bytes, start, length);
                lock.notifyAll();
            }
        } finally {
            CellThread.unguard(before);
        }
    }

    /** Waits until everything said so far is on its way, but no longer than the given time. */
    void drain(long millis) throws InterruptedException {
        long deadline = System.nanoTime() + millis * 1_000_000;
        synchronized (lock) {
            while (writing || !frames.isEmpty() || output.size() > 0) {
                long left = (deadline - System.nanoTime()) / 1_000_000;
                if (left <= 0) {
                    return;
                }
                lock.wait(left);
            }
        }
    }

    private void waitForRoom() throws InterruptedIOException {
        synchronized (lock) {
            while (output.size() > MOST_PENDING) {
                try {
                    lock.wait();
                } catch (InterruptedException e) {
                    Thread.currentThread().interrupt();
                    throw new InterruptedIOException("interrupted while waiting to write output");
                }
            }
        }
    }

    private void closeOutput() {
        if (output.size() > 0 && outputChannel != null) {
            frames.add(new Frame.Output(outputChannel, Bytes.keeping(output.toByteArray())));
            output.reset();
        }
        outputChannel = null;
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
        } catch (IOException | InterruptedException | RuntimeException | Error kernelGone) {
            // Without a way to speak this process is of no use to anyone.
            Runtime.getRuntime().halt(WorkerMain.LOST_KERNEL);
        }
    }

    private List<Frame> takeAll() throws InterruptedException {
        synchronized (lock) {
            while (frames.isEmpty() && output.size() == 0) {
                lock.wait();
            }
            closeOutput();
            List<Frame> taken = new ArrayList<>(frames);
            frames.clear();
            writing = true;
            lock.notifyAll();
            return taken;
        }
    }
}
