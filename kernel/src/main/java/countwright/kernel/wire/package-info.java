/**
 * The messaging protocol on the wire: connection file, frames, signature, messages and the sockets that carry them.
 *
 * <p>Read {@link countwright.kernel.wire.Message} first, then {@link countwright.kernel.wire.KernelSockets} (the
 * kernel's side) or {@link countwright.kernel.wire.ClientSockets} (a front end's side). No type of the socket library
 * leaves this package. Source: the Jupyter messaging specification, version 5.5.
 */
@NullMarked
package countwright.kernel.wire;

import org.jspecify.annotations.NullMarked;
