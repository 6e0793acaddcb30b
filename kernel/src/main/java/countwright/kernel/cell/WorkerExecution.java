package countwright.kernel.cell;

import countwright.kernel.worker.Worker;
import countwright.kernel.worker.WorkerLostException;
import countwright.show.MimeBundle;
import countwright.worker.Bytes;
import countwright.worker.CompiledClass;
import countwright.worker.Fault;
import countwright.worker.Frame;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.CompletionException;
import java.util.concurrent.locks.ReentrantLock;
import java.util.function.Supplier;
import jdk.jshell.spi.ExecutionControl;
import org.jspecify.annotations.Nullable;

/**
 * JShell's way to execute, carried out by the worker.
 *
 * <p>The compiler lock is let go while user code runs, so that completion and inspection answer during a long cell.
 */
final class WorkerExecution implements ExecutionControl {

    /** The name of the failure of a cell whose worker is gone. */
    static final String LOST = "WorkerLost";

    private final CompletableFuture<Worker> worker;
    private final ReentrantLock compilerLock;
    private final List<CompiledClass> pending = new ArrayList<>();
    private Frame.Want want = Frame.Want.NOTHING;
    private Optional<MimeBundle> value = Optional.empty();
    private boolean stopped;
    private Supplier<Boolean> stopRequested = () -> false;
    private Runnable beforeUnlocking = () -> {};
    private Optional<String> fault = Optional.empty();
    private volatile Optional<String> loss = Optional.empty();

    WorkerExecution(CompletableFuture<Worker> worker, ReentrantLock compilerLock) {
        this.worker = worker;
        this.compilerLock = compilerLock;
    }

    /** Says what to ask before user code starts: an interrupt may arrive while its code is still being compiled. */
    void askBeforeRunning(Supplier<Boolean> stopRequest) {
        stopRequested = stopRequest;
    }

    /** Says what to do before the compiler lock is let go while user code runs. */
    void doBeforeUnlocking(Runnable action) {
        beforeUnlocking = action;
    }

    /** Clears a variable that can no longer be named, so that its value can be collected. */
    void release(String className, String variableName) {
        try {
            var unused = request(new Frame.Release(className, variableName));
        } catch (EngineTerminationException gone) {
            // So is the value.
            return;
        }
    }

    /** Prepares for the next snippet: whether its value is wanted, and forgetting how the last one went. */
    void prepare(Frame.Want nextWant) {
        want = nextWant;
        value = Optional.empty();
        stopped = false;
        fault = Optional.empty();
    }

    /** Returns the value of the last snippet, if it was wanted and there is one. */
    Optional<MimeBundle> value() {
        return value;
    }

    /** Returns whether the last snippet was stopped by an interrupt. */
    boolean wasStopped() {
        return stopped;
    }

    /** Returns what went wrong with the last snippet on our side, of which JShell says nothing to its caller. */
    Optional<String> fault() {
        return fault;
    }

    /** Returns how the worker was lost, if it was. */
    Optional<String> loss() {
        return loss;
    }

    /** Kept until the snippet runs, or is done without running: one round trip less for each. */
    @Override
    public void load(ClassBytecodes[] classes) {
        for (ClassBytecodes each : classes) {
            pending.add(new CompiledClass(each.name(), Bytes.of(each.bytecodes())));
        }
    }

    /** Sends the classes of snippets that have not been run. */
    void loadPending() {
        if (pending.isEmpty()) {
            return;
        }
        try {
            if (request(new Frame.Load(takePending())) instanceof Frame.Failed failed) {
                fault = Optional.of(describe(failed.fault()));
            }
        } catch (EngineTerminationException gone) {
            // The loss is remembered, and the cell asks for it.
            return;
        }
    }

    private List<CompiledClass> takePending() {
        List<CompiledClass> taken = List.copyOf(pending);
        pending.clear();
        return taken;
    }

    /** Not offered: JShell then defines the class under a new name, which keeps running code undisturbed. */
    @Override
    public void redefine(ClassBytecodes[] classes) throws NotImplementedException {
        throw new NotImplementedException("redefinition is done by defining anew");
    }

    @Override
    public String invoke(String className, String methodName)
            throws RunException, EngineTerminationException, InternalException {
        if (stopRequested.get()) {
            stopped = true;
            throw new StoppedException();
        }
        Frame.Invoke invoke = new Frame.Invoke(takePending(), className, methodName, want);
        Frame.Reply reply;
        beforeUnlocking.run();
        int holds = compilerLock.getHoldCount();
        for (int i = 0; i < holds; i++) {
            compilerLock.unlock();
        }
        try {
            reply = request(invoke);
        } finally {
            for (int i = 0; i < holds; i++) {
                compilerLock.lock();
            }
        }
        if (reply instanceof Frame.Done done) {
            value = done.value();
            return done.text();
        }
        Fault failure = ((Frame.Failed) reply).fault();
        if (failure instanceof Fault.Thrown thrown) {
            throw exceptionOf(thrown);
        }
        if (failure instanceof Fault.Unresolved unresolved) {
            throw new ResolutionException(unresolved.id(), unresolved.frames().toArray(new StackTraceElement[0]));
        }
        if (failure instanceof Fault.Stopped) {
            stopped = true;
            throw new StoppedException();
        }
        fault = Optional.of(describe(failure));
        throw new InternalException(describe(failure));
    }

    @Override
    public String varValue(String className, String variableName)
            throws RunException, EngineTerminationException, InternalException {
        Frame.Reply reply = request(new Frame.ReadVariable(className, variableName));
        if (reply instanceof Frame.Done done) {
            return done.text();
        }
        throw new InternalException(((Frame.Failed) reply).fault().toString());
    }

    @Override
    public void addToClasspath(String path) throws EngineTerminationException, InternalException {
        if (request(new Frame.AddToClassPath(path)) instanceof Frame.Failed failed) {
            throw new InternalException(failed.fault().toString());
        }
    }

    /** Interrupts go to the worker directly, since they must not wait for JShell. */
    @Override
    public void stop() {}

    @Override
    public @Nullable Object extensionCommand(String command, @Nullable Object argument) throws NotImplementedException {
        throw new NotImplementedException(command);
    }

    /** The session closes the worker itself, with its own patience. */
    @Override
    public void close() {}

    private Frame.Reply request(Frame.Request request) throws EngineTerminationException {
        try {
            return worker.join().request(request);
        } catch (WorkerLostException e) {
            loss = Optional.of(String.valueOf(e.getMessage()));
            throw new EngineTerminationException(String.valueOf(e.getMessage()));
        } catch (CompletionException e) {
            Throwable cause = e.getCause() == null ? e : e.getCause();
            String how = "it could not be started: " + cause.getMessage();
            loss = Optional.of(how);
            throw new EngineTerminationException(how);
        }
    }

    private static String describe(Fault failure) {
        if (failure instanceof Fault.NotInstalled notInstalled) {
            return notInstalled.message();
        }
        return failure instanceof Fault.Internal internal ? internal.message() : failure.toString();
    }

    private static UserException exceptionOf(Fault.Thrown thrown) {
        UserException exception = new UserException(
                thrown.message().orElse(null),
                thrown.className(),
                thrown.frames().toArray(new StackTraceElement[0]));
        thrown.cause().ifPresent(cause -> exception.initCause(exceptionOf(cause)));
        return exception;
    }
}
