/** Tests of what only shows when all modules are together: the arrows between packages, and the distribution. */
@NullMarked
package countwright.install;

import org.jspecify.annotations.NullMarked;
