/**
 * The worker process: starting it, talking to it, interrupting it, and saying why it is gone.
 *
 * <p>Read {@link countwright.kernel.worker.Worker} first.
 */
@NullMarked
package countwright.kernel.worker;

import org.jspecify.annotations.NullMarked;
