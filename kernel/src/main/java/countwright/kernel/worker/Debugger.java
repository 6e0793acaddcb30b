package countwright.kernel.worker;

import com.sun.jdi.Bootstrap;
import com.sun.jdi.ClassNotLoadedException;
import com.sun.jdi.ClassType;
import com.sun.jdi.IncompatibleThreadStateException;
import com.sun.jdi.InvalidTypeException;
import com.sun.jdi.ReferenceType;
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

    /** How much is done to stop a cell. */
    enum Effort {
        /** The cell thread, where that leaves no lock held, and the threads that work for it in a parallel stream. */
        STOP,
        /** The same wherever it is, and what it waits for as well. */
        STOP_AND_FREE,
        /** User code is made to return on the spot, for a loop that catches whatever is thrown into it. */
        CUT
    }

    /** What the cell thread was found to do. */
    enum Found {
        /** Nothing that is known, or nothing could be looked at. */
        NOTHING,
        /** In the middle of locking or the like, and left alone. */
        LOCKING,
        /** Running user code, into which a stop was thrown. */
        USER_CODE,
        /** Waiting for a monitor; what holds it was stopped if that is user code. */
        MONITOR,
        /** Waiting for a connection in native code; the cell thread's class has been told which. */
        AWAITED_CONNECTION
    }

    /** Throws into the cell thread if it is in user code just now. */
    Found stopUserCode(Effort effort) {
        VirtualMachine attached = machine.isCompletedExceptionally() ? null : machine.getNow(null);
        if (attached == null) {
            return Found.NOTHING;
        }
        try {
            List<ReferenceType> types = attached.classesByName(CELL_THREAD);
            if (types.isEmpty() || !(types.get(0) instanceof ClassType type)) {
                return Found.NOTHING;
            }
            return new CellStopper(attached, type).stop(effort);
        } catch (RuntimeException
                | InvalidTypeException
                | IncompatibleThreadStateException
                | ClassNotLoadedException e) {
            // Of many kinds: disconnected, a thread just gone, a fault of the interface. There is always another try.
            LOG.log(Level.DEBUG, "the cell could not be stopped", e);
            return Found.NOTHING;
        }
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
