/**
 * The agent inside the JVM that runs the user's code, and the stream that joins it to the kernel.
 */
@NullMarked
package countwright.worker;

import org.jspecify.annotations.NullMarked;
