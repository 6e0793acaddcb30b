/**
 * Cells: splitting, evaluating, diagnosing, completing and documenting Java, over JShell.
 *
 * <p>Read {@link countwright.kernel.cell.CellEngine} first: it is all that the message handlers see.
 */
@NullMarked
package countwright.kernel.cell;

import org.jspecify.annotations.NullMarked;
