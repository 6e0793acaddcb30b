package countwright.worker;

import countwright.show.Comms;
import java.util.Optional;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.LinkedBlockingQueue;

/**
 * The one thread on which the handlers of comm messages run, in the order in which the messages came, beside the cells.
 * Whatever it says or shows belongs to the message it is at.
 */
final class CommThread extends Thread {

    /** Stands for no message: what is said belongs to the cell. */
    static final long NONE = 0;

    private final BlockingQueue<Frame.CommReceived> messages = new LinkedBlockingQueue<>();
    private final Outbox outbox;

    /** Written by this thread; read by others only to see whether it is at a message. */
    private volatile long number = NONE;

    CommThread(Outbox outbox) {
        super("comms");
        this.outbox = outbox;
        setDaemon(true);
    }

    /** Returns the number of the message whose handler runs on the calling thread, or {@link #NONE}. */
    static long messageBeingHandled() {
        return Thread.currentThread() instanceof CommThread comms ? comms.number : NONE;
    }

    /** Queues a message. */
    void accept(Frame.CommReceived message) {
        messages.add(message);
    }

    /** Interrupts the handler that runs, if one does. */
    void interruptHandler() {
        if (number != NONE) {
            interrupt();
        }
    }

    @Override
    public void run() {
        while (true) {
            try {
                Frame.CommReceived received = messages.take();
                outbox.put(new Frame.Handled(received.number(), handle(received)));
            } catch (InterruptedException lateInterrupt) {
                // It was meant for a handler that has ended meanwhile.
                number = NONE;
            } catch (OutOfMemoryError full) {
                // Without an answer the message would never be over; a worker that is gone is replaced.
                Runtime.getRuntime().halt(WorkerMain.OUT_OF_MEMORY);
            }
        }
    }

    private Optional<Fault> handle(Frame.CommReceived received) {
        number = received.number();
        try {
            Comms.receive(received.message());
            return Optional.empty();
        } catch (Throwable thrown) {
            return Optional.of(describe(thrown));
        } finally {
            number = NONE;
            interrupted();
        }
    }

    /** The methods of an exception can be user code as well, and memory can be full. */
    private static Fault describe(Throwable thrown) {
        try {
            return Faults.of(thrown);
        } catch (Throwable e) {
            return new Fault.Internal("it failed, and so did the description of its failure");
        }
    }
}
