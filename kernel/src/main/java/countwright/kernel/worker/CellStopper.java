package countwright.kernel.worker;

import com.sun.jdi.ClassNotLoadedException;
import com.sun.jdi.ClassType;
import com.sun.jdi.IncompatibleThreadStateException;
import com.sun.jdi.IntegerValue;
import com.sun.jdi.InvalidTypeException;
import com.sun.jdi.ObjectReference;
import com.sun.jdi.StackFrame;
import com.sun.jdi.ThreadReference;
import com.sun.jdi.Value;
import com.sun.jdi.VirtualMachine;
import countwright.worker.CellThread;
import java.util.List;
import java.util.Set;
import java.util.concurrent.locks.LockSupport;
import org.jspecify.annotations.Nullable;

/**
 * Throws into the cell thread of a worker, and looks for what keeps the throw from arriving.
 *
 * <p>A thread takes a stop in Java code, in a sleep or in a wait, but neither while it waits to enter a monitor nor in
 * native code. For the first, the thread that holds the monitor is stopped if it runs user code; for the second, where
 * the thread waits for a network connection, that connection is named for the worker to close. A parallel stream runs on
 * threads of the common pool too; they are stopped with the cell thread, where they would otherwise finish their share.
 * A stop that arrives between a lock's taking and the block that frees it would leave it held for ever.
 */
final class CellStopper {

    /** Frames looked at from the top; a stack that overflows has many thousands. */
    private static final int DEEPEST_FRAME = 200;

    /** Native waits are called from close by. */
    private static final int NEAREST_FRAMES = 12;

    /** How long the threads of a pool are stopped, share after share. */
    private static final long POOL_MILLIS = 400;

    /** How long a pool must have had nothing to stop: between two shares a thread looks idle. */
    private static final long QUIET_MILLIS = 40;

    private static final long LOOK_AGAIN_MILLIS = 4;

    private static final String OUTBOX = "countwright.worker.Outbox";
    private static final String TASK = "java.util.concurrent.ForkJoinTask";

    /** Where a stop could leave a lock held or a pool in disorder. */
    private static final List<String> DELICATE =
            List.of("java.util.concurrent.ForkJoin", "java.util.concurrent.locks.");

    private static final String COMMON_POOL = "ForkJoinPool.commonPool-worker-";

    /** The package into which the compiler puts what stands in cells. */
    static final String CELLS = "REPL.";

    /** Whose methods wait in native code until another thread closes them. */
    private static final Set<String> CONNECTIONS = Set.of(
            "java.net.Socket",
            "java.net.Socket$SocketInputStream",
            "java.net.Socket$SocketOutputStream",
            "java.net.ServerSocket",
            "java.net.DatagramSocket");

    private final VirtualMachine machine;
    private final ClassType cellThread;

    CellStopper(VirtualMachine machine, ClassType cellThread) {
        this.machine = machine;
        this.cellThread = cellThread;
    }

    Debugger.Found stop(Debugger.Effort effort)
            throws InvalidTypeException, IncompatibleThreadStateException, ClassNotLoadedException {
        if (!(valueOf("current") instanceof ThreadReference thread)
                || !(valueOf("STOP") instanceof ObjectReference stop)) {
            return Debugger.Found.NOTHING;
        }
        if (effort == Debugger.Effort.CUT) {
            // What waits for a monitor can be made to return as little as it can be thrown into.
            Debugger.Found freed = free(thread, stop);
            if (freed != Debugger.Found.USER_CODE || new CellCutter(machine, cellThread).cut(thread, stop)) {
                return freed;
            }
        }
        boolean parallel;
        thread.suspend();
        try {
            if (!isInUserCode()) {
                return Debugger.Found.NOTHING;
            }
            if (effort == Debugger.Effort.STOP && isDelicate(thread)) {
                return Debugger.Found.LOCKING;
            }
            parallel = hasFrameOf(thread, TASK);
            thread.stop(stop);
        } finally {
            thread.resume();
        }
        if (parallel) {
            stopPool(stop);
        }
        return effort == Debugger.Effort.STOP_AND_FREE ? free(thread, stop) : Debugger.Found.USER_CODE;
    }

    private boolean isInUserCode() {
        return isInUserCode(cellThread);
    }

    static boolean isInUserCode(ClassType cellThread) {
        return cellThread.getValue(cellThread.fieldByName("phase")) instanceof IntegerValue phase
                && phase.value() == CellThread.USER_CODE;
    }

    /**
     * Stops the pool's threads again and again, since each goes on with its next share; until none is left, but not for
     * long. Whatever went on in the pool after the cell would go on for ever.
     */
    private void stopPool(ObjectReference stop) throws InvalidTypeException, IncompatibleThreadStateException {
        List<ThreadReference> pool = machine.allThreads().stream()
                .filter(thread -> thread.name().startsWith(COMMON_POOL))
                .toList();
        long start = System.nanoTime();
        long lastSeen = start;
        while (millisSince(lastSeen) < QUIET_MILLIS && millisSince(start) < POOL_MILLIS) {
            boolean quiet = true;
            for (ThreadReference thread : pool) {
                quiet &= stopWorkerOfPool(thread, stop);
            }
            if (!quiet) {
                lastSeen = System.nanoTime();
            }
            LockSupport.parkNanos(LOOK_AGAIN_MILLIS * 1_000_000);
        }
    }

    private static long millisSince(long nanoTime) {
        return (System.nanoTime() - nanoTime) / 1_000_000;
    }

    /** Returns whether nothing is left to stop. */
    private static boolean stopWorkerOfPool(ThreadReference thread, ObjectReference stop)
            throws InvalidTypeException, IncompatibleThreadStateException {
        thread.suspend();
        try {
            if (!hasFrameOf(thread, TASK)) {
                return true;
            }
            // In the middle of the pool's book-keeping, or of our own, a stop would do damage.
            if (isDelicate(thread) || isSpeaking(thread)) {
                return false;
            }
            thread.stop(stop);
            return false;
        } finally {
            thread.resume();
        }
    }

    /** Tells whether a thread is changing what the worker says; one that waits for room there is not. */
    private static boolean isSpeaking(ThreadReference thread) throws IncompatibleThreadStateException {
        for (StackFrame frame : framesOf(thread, NEAREST_FRAMES)) {
            if (typeOf(frame).equals(OUTBOX)) {
                return !frame.location().method().name().equals("waitForRoom");
            }
        }
        return false;
    }

    private static boolean isDelicate(ThreadReference thread) throws IncompatibleThreadStateException {
        String top = typeOf(thread.frame(0));
        return DELICATE.stream().anyMatch(top::startsWith);
    }

    private static String typeOf(StackFrame frame) {
        return frame.location().declaringType().name();
    }

    /** All threads are held meanwhile: the interface tells the owner of a monitor only if it is. */
    private Debugger.Found free(ThreadReference thread, ObjectReference stop)
            throws InvalidTypeException, IncompatibleThreadStateException, ClassNotLoadedException {
        machine.suspend();
        try {
            if (!isInUserCode()) {
                return Debugger.Found.NOTHING;
            }
            ObjectReference monitor = machine.canGetCurrentContendedMonitor() ? thread.currentContendedMonitor() : null;
            if (monitor != null) {
                ThreadReference owner = monitor.owningThread();
                if (owner != null && !owner.equals(thread) && runsCells(owner) && !isSpeaking(owner)) {
                    owner.stop(stop);
                }
                return Debugger.Found.MONITOR;
            }
            ObjectReference connection = awaitedConnection(thread);
            if (connection == null) {
                return Debugger.Found.USER_CODE;
            }
            cellThread.setValue(cellThread.fieldByName("awaited"), connection);
            return Debugger.Found.AWAITED_CONNECTION;
        } finally {
            machine.resume();
        }
    }

    private static @Nullable ObjectReference awaitedConnection(ThreadReference thread)
            throws IncompatibleThreadStateException {
        List<StackFrame> frames = framesOf(thread, NEAREST_FRAMES);
        if (frames.isEmpty() || !frames.get(0).location().method().isNative()) {
            return null;
        }
        for (StackFrame frame : frames) {
            if (CONNECTIONS.contains(typeOf(frame))) {
                ObjectReference connection = frame.thisObject();
                if (connection != null) {
                    return connection;
                }
            }
        }
        return null;
    }

    private static boolean runsCells(ThreadReference thread) throws IncompatibleThreadStateException {
        for (StackFrame frame : framesOf(thread, DEEPEST_FRAME)) {
            if (typeOf(frame).startsWith(CELLS)) {
                return true;
            }
        }
        return false;
    }

    private static boolean hasFrameOf(ThreadReference thread, String type) throws IncompatibleThreadStateException {
        for (StackFrame frame : framesOf(thread, DEEPEST_FRAME)) {
            if (typeOf(frame).equals(type)) {
                return true;
            }
        }
        return false;
    }

    private static List<StackFrame> framesOf(ThreadReference thread, int most) throws IncompatibleThreadStateException {
        return thread.frames(0, Math.min(thread.frameCount(), most));
    }

    private @Nullable Value valueOf(String field) {
        return cellThread.getValue(cellThread.fieldByName(field));
    }
}
