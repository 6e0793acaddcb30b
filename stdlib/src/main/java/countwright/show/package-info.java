/**
 * How a value shows itself, and the seam through which cells talk to whoever hosts them.
 *
 * <p>Read {@link countwright.show.Displayable} first, then {@link countwright.show.MimeBundle}. The host (the worker of
 * the kernel, or a plain terminal) stands behind {@link countwright.show.Stage}.
 */
@NullMarked
package countwright.show;

import org.jspecify.annotations.NullMarked;
