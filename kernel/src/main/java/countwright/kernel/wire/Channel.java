package countwright.kernel.wire;

import java.util.Locale;

/** The five sockets between a front end and a kernel. */
public enum Channel {
    /** Requests, in order. */
    SHELL,
    /** Requests that must not wait behind a running cell. */
    CONTROL,
    /** Questions from the kernel to a front end. */
    STDIN,
    /** What the kernel tells every front end. */
    IOPUB,
    /** Proof of life: what is sent comes back. */
    HEARTBEAT;

    /** Returns the name the protocol uses for this channel. */
    public String protocolName() {
        return name().toLowerCase(Locale.ROOT);
    }

    /** Returns the field of the connection file that holds this channel's port. */
    public String portField() {
        return this == HEARTBEAT ? "hb_port" : protocolName() + "_port";
    }
}
