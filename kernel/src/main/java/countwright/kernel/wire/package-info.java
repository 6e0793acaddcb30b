/**
 * The messaging protocol on the wire: connection file, frames, signature, messages and the sockets that carry them.
 *
 * <p>Read {@link countwright.kernel.wire.Message} first, then {@link countwright.kernel.wire.KernelSockets} (the
 * kernel's side) or {@link countwright.kernel.wire.ClientSockets} (a front end's side). No type of the socket library
 * leaves this package. The kernel's side speaks the transport protocol itself: see {@link
 * countwright.kernel.wire.PeerLoop}. Sources: the Jupyter messaging specification, version 5.5; ZeroMQ RFC 23/ZMTP.
 */
@NullMarked
package countwright.kernel.wire;

import org.jspecify.annotations.NullMarked;
