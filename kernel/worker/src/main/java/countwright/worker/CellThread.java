package countwright.worker;

import countwright.show.MimeBundle;
import countwright.show.Renderer;
import java.lang.reflect.Field;
import java.lang.reflect.InvocationTargetException;
import java.lang.reflect.Method;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.LinkedBlockingQueue;
import jdk.jshell.execution.DirectExecutionControl;
import jdk.jshell.spi.ExecutionControl.ClassBytecodes;
import jdk.jshell.spi.ExecutionControl.ClassInstallException;
import jdk.jshell.spi.ExecutionControl.EngineTerminationException;
import jdk.jshell.spi.ExecutionControl.NotImplementedException;
import org.jspecify.annotations.Nullable;

/**
 * The one thread on which cells run: it carries out the kernel's requests in order and answers each once.
 *
 * <p>A cell that does not listen to {@link Thread#interrupt} is stopped from outside through the debugger interface: the
 * kernel suspends this thread, reads {@link #phase}, and only where it is {@link #USER_CODE} lets {@link #STOP} be thrown
 * here. Any other phase means that a stop could break our own state (a frame half queued, an answer lost), and the kernel
 * tries again a moment later. The names of these static fields are therefore part of the protocol.
 */
public final class CellThread extends Thread {

    /** The phase in which an asynchronous stop does no harm. */
    public static final int USER_CODE = 1;

    private static final int OURS = 0;

    /** Not more: with a debugger attached, unwinding an overflow takes 300 ms a megabyte. */
    private static final long STACK_BYTES = 2L << 20;

    private static final int RESERVE_BYTES = 4 << 20;
    private static final long AMPLE_ROOM_BYTES = 32L << 20;
    private static final long LARGEST_BUNDLE = 64L << 20;

    // Made beforehand, for the moment in which nothing can be made any more.
    private static final byte[] NOTHING = {};
    private static final Frame.Reply MEMORY_FULL = new Frame.Failed(new Fault.Thrown(
            OutOfMemoryError.class.getName(), Optional.of("Java heap space"), List.of(), Optional.empty()));

    /** What the kernel throws into this thread. Made beforehand, since nothing can be made while it is suspended. */
    @SuppressWarnings("StaticAssignmentOfThrowable")
    static final CellStop STOP = new CellStop();

    // Both are read by the kernel through the debugger interface.
    static volatile int phase = OURS;
    static volatile @Nullable Thread current;

    private static volatile boolean stopWhenSpeaking;

    /** Set by the kernel when it has made user code return before its end. */
    static volatile boolean cut;

    /** The connection that this thread waits for in native code, where no stop reaches it; written by the kernel. */
    static volatile @Nullable Object awaited;

    private volatile boolean busy;
    private volatile long lastEnd = System.nanoTime();

    private final BlockingQueue<Frame.Request> requests = new LinkedBlockingQueue<>();
    private final Outbox outbox;
    private final ClassKeeper classes = new ClassKeeper();

    /** Given up when user code has filled the memory, so that there is room to say so and to run the cell that mends it. */
    private byte[] reserve = new byte[RESERVE_BYTES];

    CellThread(Outbox outbox) {
        super(null, null, "cell", STACK_BYTES);
        this.outbox = outbox;
        setDaemon(true);
    }

    /** Queues a request. */
    void accept(Frame.Request request) {
        requests.add(request);
    }

    /** Marks a stretch of our own code on this thread in which it must not be stopped; does nothing on other threads. */
    static int guard() {
        int before = phase;
        if (Thread.currentThread() == current) {
            phase = OURS;
        }
        return before;
    }

    /** Ends the stretch that {@link #guard} began, given what it returned. */
    static void unguard(int before) {
        if (Thread.currentThread() == current) {
            phase = before;
        }
    }

    /** Closes the connection that this thread waits for, which ends the wait; on a thread of its own, since it may last. */
    void closeAwaited() {
        if (awaited instanceof AutoCloseable connection) {
            awaited = null;
            Thread closing = new Thread(
                    () -> {
                        try {
                            connection.close();
                        } catch (Exception | Error e) {
                            // Then the wait goes on, and the kernel reports it.
                            return;
                        }
                    },
                    "close connection");
            closing.setDaemon(true);
            closing.start();
        }
    }

    /** Has this thread stop itself when it next says something: a flood is nearly always where no stop may be thrown. */
    static void stopWhenSpeaking() {
        stopWhenSpeaking = true;
    }

    /** Called where user code on any thread is about to say something. */
    static void stopIfAsked() {
        if (stopWhenSpeaking && phase == USER_CODE && Thread.currentThread() == current) {
            throw STOP;
        }
    }

    @Override
    public void run() {
        current = this;
        try {
            while (true) {
                serveNext();
            }
        } catch (Throwable lost) {
            // A worker that no longer answers would hang its cell for ever; one that is gone is replaced.
            Runtime.getRuntime().halt(WorkerMain.OUT_OF_MEMORY);
        }
    }

    /** Tells whether no request has been under way for some time. */
    boolean hasRested(long millis) {
        return !busy && System.nanoTime() - lastEnd > millis * 1_000_000;
    }

    private void serveNext() {
        Frame.Reply reply;
        try {
            Frame.Request next = requests.take();
            busy = true;
            reply = answer(next);
        } catch (InterruptedException lateInterrupt) {
            return;
        } catch (OutOfMemoryError full) {
            phase = OURS;
            reserve = NOTHING;
            reply = MEMORY_FULL;
        } catch (Throwable unexpected) {
            phase = OURS;
            reply = new Frame.Failed(new Fault.Internal(String.valueOf(unexpected)));
        }
        try {
            outbox.put(reply);
        } catch (OutOfMemoryError full) {
            reserve = NOTHING;
            outbox.put(reply);
        }
        lastEnd = System.nanoTime();
        busy = false;
    }

    private Frame.Reply answer(Frame.Request request) {
        try {
            if (request instanceof Frame.Invoke invoke) {
                return invoke(invoke);
            }
            if (request instanceof Frame.Load load) {
                classes.load(load.classes());
                return done("");
            }
            if (request instanceof Frame.ReadVariable read) {
                return done(classes.varValue(read.className(), read.variableName()));
            }
            if (request instanceof Frame.Release release) {
                classes.release(release.className(), release.variableName());
                return done("");
            }
            Frame.AddToClassPath add = (Frame.AddToClassPath) request;
            classes.addToClasspath(add.path());
            return done("");
        } catch (ClassInstallException e) {
            List<Boolean> installed = new ArrayList<>();
            for (boolean each : e.installed()) {
                installed.add(each);
            }
            return new Frame.Failed(new Fault.NotInstalled(String.valueOf(e.getMessage()), installed));
        } catch (Exception | LinkageError e) {
            return new Frame.Failed(new Fault.Internal(e.toString()));
        }
    }

    private Frame.Reply invoke(Frame.Invoke request)
            throws ClassInstallException, NotImplementedException, EngineTerminationException {
        classes.load(request.classes());
        Method method;
        try {
            Class<?> owner = classes.find(request.className());
            method = owner.getDeclaredMethod(request.methodName());
            method.setAccessible(true);
            setContextClassLoader(owner.getClassLoader());
        } catch (ReflectiveOperationException | LinkageError e) {
            return new Frame.Failed(new Fault.Internal(e.toString()));
        }
        refillReserve();
        cut = false;
        stopWhenSpeaking = false;
        CellValue.set(null);
        // Two layers, because a stop may arrive anywhere until the phase is ours again, also in the inner handlers.
        try {
            Frame.Reply reply = invokeStoppably(method, request.want());
            return cut ? new Frame.Failed(new Fault.Stopped()) : reply;
        } catch (CellStop late) {
            phase = OURS;
            return new Frame.Failed(new Fault.Stopped());
        } finally {
            phase = OURS;
            // An interrupt that came too late must not reach the next cell.
            interrupted();
        }
    }

    private Frame.Reply invokeStoppably(Method method, Frame.Want want) {
        try {
            phase = USER_CODE;
            Object returned = method.invoke(null);
            Object handedOver = CellValue.take();
            Object value = handedOver == null ? returned : handedOver;
            Optional<MimeBundle> bundle = want == Frame.Want.BUNDLE ? render(value) : Optional.empty();
            phase = OURS;
            return new Frame.Done("", bundle);
        } catch (InvocationTargetException e) {
            return failed(e.getCause() == null ? e : e.getCause());
        } catch (Throwable e) {
            // The method was found and is accessible, so this came from rendering its value, or is a stop.
            return failed(e);
        }
    }

    /** Still in the phase of user code: an exception can have methods of its own, which may have to be stopped. */
    private Frame.Failed failed(Throwable thrown) {
        if (thrown instanceof OutOfMemoryError) {
            reserve = NOTHING;
        }
        return new Frame.Failed(Faults.of(thrown));
    }

    /** Takes the reserve back only once there is ample room: before that, the cell that mends matters needs it. */
    private void refillReserve() {
        Runtime memory = Runtime.getRuntime();
        long room = memory.maxMemory() - memory.totalMemory() + memory.freeMemory();
        if (reserve.length == 0 && room > AMPLE_ROOM_BYTES) {
            try {
                reserve = new byte[RESERVE_BYTES];
            } catch (OutOfMemoryError stillFull) {
                reserve = NOTHING;
            }
        }
    }

    private static Optional<MimeBundle> render(@Nullable Object value) {
        // System.out.printf(...) and append(...) return the stream itself, which is nobody's result.
        return value == System.out || value == System.err
                ? Optional.empty()
                : Renderer.render(value).map(CellThread::checkSize);
    }

    /** Refuses what would not fit through the stream, before any of it is on its way. */
    static MimeBundle checkSize(MimeBundle bundle) {
        long size = 0;
        for (String form : bundle.data().values()) {
            size += form.length();
        }
        if (size > LARGEST_BUNDLE) {
            throw new IllegalArgumentException("what is to be shown has " + size + " characters; at most "
                    + LARGEST_BUNDLE + " can be. Show a part of it, or write it to a file.");
        }
        return bundle;
    }

    private static Frame.Done done(String text) {
        return new Frame.Done(text, Optional.empty());
    }

    /** JShell's own class loading and redefinition, without its way of running. */
    private static final class ClassKeeper extends DirectExecutionControl {

        Class<?> find(String className) throws ClassNotFoundException {
            return findClass(className);
        }

        void load(List<CompiledClass> compiled)
                throws ClassInstallException, NotImplementedException, EngineTerminationException {
            if (!compiled.isEmpty()) {
                load(compiled.stream()
                        .map(each ->
                                new ClassBytecodes(each.name(), each.bytecode().toArray()))
                        .toArray(ClassBytecodes[]::new));
            }
        }

        void release(String className, String variableName) {
            try {
                Field field = findClass(className).getDeclaredField(variableName);
                if (!field.getType().isPrimitive()) {
                    field.setAccessible(true);
                    field.set(null, null);
                }
            } catch (ReflectiveOperationException gone) {
                // Then it holds nothing.
                return;
            }
        }
    }
}
