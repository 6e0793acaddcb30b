package countwright.kernel.worker;

import com.sun.jdi.ClassNotLoadedException;
import com.sun.jdi.ClassType;
import com.sun.jdi.IncompatibleThreadStateException;
import com.sun.jdi.InvalidTypeException;
import com.sun.jdi.Method;
import com.sun.jdi.ObjectReference;
import com.sun.jdi.StackFrame;
import com.sun.jdi.ThreadReference;
import com.sun.jdi.Value;
import com.sun.jdi.VirtualMachine;
import com.sun.jdi.event.Event;
import com.sun.jdi.event.EventSet;
import com.sun.jdi.event.StepEvent;
import com.sun.jdi.request.EventRequest;
import com.sun.jdi.request.StepRequest;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Makes the user's outermost method return on the spot, without its catch and finally blocks, but with its monitors
 * freed: for a loop that catches whatever is thrown into it.
 *
 * <p>That needs the thread to be in Java code. A loop that sleeps is nearly always in a native method, and back in it
 * sooner than anyone could look; there a stop wakes the thread, and a step, as of a debugger, holds it where it is caught.
 */
final class CellCutter {

    private static final long STEP_MILLIS = 100;

    private final VirtualMachine machine;
    private final ClassType cellThread;

    CellCutter(VirtualMachine machine, ClassType cellThread) {
        this.machine = machine;
        this.cellThread = cellThread;
    }

    /** Returns whether the method was made to return. */
    boolean cut(ThreadReference thread, ObjectReference stop) throws InvalidTypeException, ClassNotLoadedException {
        if (!machine.canPopFrames() || !machine.canForceEarlyReturn()) {
            return false;
        }
        try {
            letGo();
            return cutInJava(thread) || cutWhenCaught(thread, stop);
        } catch (InterruptedException closing) {
            Thread.currentThread().interrupt();
            return false;
        } catch (IncompatibleThreadStateException | UnsupportedOperationException notHere) {
            return false;
        }
    }

    private boolean cutInJava(ThreadReference thread)
            throws InvalidTypeException, ClassNotLoadedException, IncompatibleThreadStateException {
        thread.suspend();
        try {
            return cutSuspended(thread);
        } finally {
            thread.resume();
        }
    }

    private boolean cutWhenCaught(ThreadReference thread, ObjectReference stop)
            throws InvalidTypeException, ClassNotLoadedException, IncompatibleThreadStateException,
                    InterruptedException {
        StepRequest step =
                machine.eventRequestManager().createStepRequest(thread, StepRequest.STEP_MIN, StepRequest.STEP_OUT);
        step.setSuspendPolicy(EventRequest.SUSPEND_EVENT_THREAD);
        step.addCountFilter(1);
        boolean held = false;
        try {
            thread.suspend();
            try {
                if (!CellStopper.isInUserCode(cellThread)) {
                    return false;
                }
                step.enable();
                thread.stop(stop);
            } finally {
                thread.resume();
            }
            held = isHeldAt(step);
            machine.eventRequestManager().deleteEventRequest(step);
            return held && cutSuspended(thread);
        } finally {
            if (!held) {
                machine.eventRequestManager().deleteEventRequest(step);
                letGo();
            } else {
                thread.resume();
            }
        }
    }

    private boolean isHeldAt(StepRequest step) throws InterruptedException {
        long deadline = System.nanoTime() + STEP_MILLIS * 1_000_000;
        for (long left = STEP_MILLIS; left > 0; left = (deadline - System.nanoTime()) / 1_000_000) {
            EventSet events = machine.eventQueue().remove(left);
            if (events == null) {
                return false;
            }
            for (Event event : events) {
                if (event instanceof StepEvent stepped && step.equals(stepped.request())) {
                    return true;
                }
            }
            events.resume();
        }
        return false;
    }

    /** Resumes what a step of an earlier attempt has held too late. */
    private void letGo() throws InterruptedException {
        for (EventSet late = machine.eventQueue().remove(1);
                late != null;
                late = machine.eventQueue().remove(1)) {
            late.resume();
        }
    }

    private boolean cutSuspended(ThreadReference thread)
            throws InvalidTypeException, ClassNotLoadedException, IncompatibleThreadStateException {
        if (!CellStopper.isInUserCode(cellThread)) {
            return false;
        }
        List<StackFrame> frames = thread.frames();
        int outermost = frames.size() - 1;
        while (outermost >= 0 && !isOfCell(frames.get(outermost))) {
            outermost--;
        }
        for (int i = 0; i <= outermost; i++) {
            if (frames.get(i).location().method().isNative()) {
                return false;
            }
        }
        if (outermost < 0) {
            return false;
        }
        Method method = frames.get(outermost).location().method();
        if (outermost > 0) {
            thread.popFrames(frames.get(outermost - 1));
        }
        cellThread.setValue(cellThread.fieldByName("cut"), machine.mirrorOf(true));
        thread.forceEarlyReturn(nothingOf(method));
        return true;
    }

    private static boolean isOfCell(StackFrame frame) {
        return frame.location().declaringType().name().startsWith(CellStopper.CELLS);
    }

    private @Nullable Value nothingOf(Method method) {
        return switch (method.signature().charAt(method.signature().indexOf(')') + 1)) {
            case 'V' -> machine.mirrorOfVoid();
            case 'Z' -> machine.mirrorOf(false);
            case 'B' -> machine.mirrorOf((byte) 0);
            case 'C' -> machine.mirrorOf((char) 0);
            case 'S' -> machine.mirrorOf((short) 0);
            case 'I' -> machine.mirrorOf(0);
            case 'J' -> machine.mirrorOf(0L);
            case 'F' -> machine.mirrorOf(0f);
            case 'D' -> machine.mirrorOf(0.0);
            default -> null;
        };
    }
}
