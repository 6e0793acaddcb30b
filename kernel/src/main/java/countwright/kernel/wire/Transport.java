package countwright.kernel.wire;

import java.util.Locale;

/** How a front end and its kernel are connected. */
public enum Transport {
    /** TCP ports of an address. */
    TCP,
    /** Unix domain sockets, named by a path and a number: only for processes of the same machine and user. */
    IPC;

    /** Returns the name the protocol uses for this transport. */
    public String protocolName() {
        return name().toLowerCase(Locale.ROOT);
    }
}
