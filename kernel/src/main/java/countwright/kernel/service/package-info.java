/**
 * What the kernel does about each message: one handler a request type, publishing, questions to the person, history.
 *
 * <p>Read {@link countwright.kernel.service.KernelServer} first, then {@code Dispatcher}, which holds the order in which
 * requests are answered.
 */
@NullMarked
package countwright.kernel.service;

import org.jspecify.annotations.NullMarked;
