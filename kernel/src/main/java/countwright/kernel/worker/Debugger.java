package countwright.kernel.worker;

import com.sun.jdi.Bootstrap;
import com.sun.jdi.ClassType;
import com.sun.jdi.IntegerValue;
import com.sun.jdi.InvalidTypeException;
import com.sun.jdi.ObjectReference;
import com.sun.jdi.ReferenceType;
import com.sun.jdi.ThreadReference;
import com.sun.jdi.VirtualMachine;
import com.sun.jdi.connect.Connector;
import com.sun.jdi.connect.IllegalConnectorArgumentsException;
import com.sun.jdi.connect.ListeningConnector;
import countwright.worker.CellThread;
import java.io.IOException;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.util.List;
import java.util.Map;
import java.util.concurrent.CompletableFuture;
import org.jspecify.annotations.Nullable;

/**
 * The debugger interface to a worker, used for one thing: throwing into the cell thread when interrupting it does not
 * help. The kernel listens and the worker connects, so that no debugging port stays open on the machine.
 *
 * <p>Thread.stop is gone from JDK 20 on; the debugger interface still offers it.
 */
final class Debugger implements AutoCloseable {

    private static final Logger LOG = System.getLogger(Debugger.class.getName());
    private static final String CELL_THREAD = CellThread.class.getName();
    private static final int ACCEPT_MILLIS = 30_000;
    private static final Object LISTENING = new Object();

    private final ListeningConnector connector;
    private final Map<String, Connector.Argument> arguments;
    private final String address;
    private final CompletableFuture<VirtualMachine> machine = new CompletableFuture<>();

    private Debugger(ListeningConnector connector, Map<String, Connector.Argument> arguments, String address) {
        this.connector = connector;
        this.arguments = arguments;
        this.address = address;
    }

    /** Starts listening on a free loopback port. The connector keeps one unguarded list for all who listen. */
    static Debugger listen() throws IOException {
        ListeningConnector connector = Bootstrap.virtualMachineManager().listeningConnectors().stream()
                .filter(each -> each.transport().name().equals("dt_socket"))
                .findFirst()
                .orElseThrow(() -> new IOException("this JDK has no debugger interface over sockets"));
        Map<String, Connector.Argument> arguments = connector.defaultArguments();
        set(arguments, "localAddress", "127.0.0.1");
        set(arguments, "port", "0");
        set(arguments, "timeout", Integer.toString(ACCEPT_MILLIS));
        try {
            synchronized (LISTENING) {
                return new Debugger(connector, arguments, connector.startListening(arguments));
            }
        } catch (IllegalConnectorArgumentsException e) {
            throw new IOException("the debugger interface does not take a loopback address", e);
        }
    }

    private static void set(Map<String, Connector.Argument> arguments, String name, String value) {
        Connector.Argument argument = arguments.get(name);
        if (argument != null) {
            argument.setValue(value);
        }
    }

    /** Returns the address the worker's agent is to connect to. */
    String address() {
        return "127.0.0.1:" + address.substring(address.lastIndexOf(':') + 1);
    }

    /** Waits for the worker on a thread of its own, so that starting does not take longer. */
    void attachBehind() {
        Thread thread = new Thread(this::attach, "debugger attach");
        thread.setDaemon(true);
        thread.start();
    }

    private void attach() {
        try {
            VirtualMachine attached = connector.accept(arguments);
            machine.complete(attached);
        } catch (IOException | IllegalConnectorArgumentsException | RuntimeException e) {
            LOG.log(Level.WARNING, "no debugger connection to the worker: {0}", String.valueOf(e.getMessage()));
            machine.completeExceptionally(e);
        } finally {
            stopListening();
        }
    }

    /** Throws into the cell thread if it is in user code just now; returns whether it was. */
    boolean stopUserCode() {
        VirtualMachine attached = machine.isCompletedExceptionally() ? null : machine.getNow(null);
        if (attached == null) {
            return false;
        }
        try {
            List<ReferenceType> types = attached.classesByName(CELL_THREAD);
            if (types.isEmpty() || !(types.get(0) instanceof ClassType type)) {
                return false;
            }
            return stopUserCode(type);
        } catch (RuntimeException | InvalidTypeException e) {
            // Of many kinds: disconnected, a thread just gone, a fault of the interface. There is always another try.
            LOG.log(Level.DEBUG, "the cell could not be stopped", e);
            return false;
        }
    }

    private static boolean stopUserCode(ClassType type) throws InvalidTypeException {
        ThreadReference thread = (ThreadReference) valueOf(type, "current");
        ObjectReference stop = (ObjectReference) valueOf(type, "STOP");
        if (thread == null || stop == null) {
            return false;
        }
        thread.suspend();
        try {
            if (!(valueOf(type, "phase") instanceof IntegerValue phase) || phase.value() != CellThread.USER_CODE) {
                return false;
            }
            thread.stop(stop);
            return true;
        } finally {
            thread.resume();
        }
    }

    private static com.sun.jdi.@Nullable Value valueOf(ClassType type, String field) {
        return type.getValue(type.fieldByName(field));
    }

    private void stopListening() {
        try {
            synchronized (LISTENING) {
                connector.stopListening(arguments);
            }
        } catch (IOException | IllegalConnectorArgumentsException e) {
            LOG.log(Level.DEBUG, "already not listening", e);
        }
    }

    /** Stops listening. The connection is left to end with the worker: to end it politely can hang with a stopped one. */
    @Override
    public void close() {
        stopListening();
    }
}
