/**
 * The headless desk: runs a notebook from top to bottom through a kernel of its own and writes what came of it.
 *
 * <p>Read {@link countwright.kernel.desk.NotebookRun} first. A {@link countwright.kernel.desk.Notebook} is a file in the
 * open notebook format, version 4; {@link countwright.kernel.desk.HtmlReport} is the page a colleague reads.
 */
@NullMarked
package countwright.kernel.desk;

import org.jspecify.annotations.NullMarked;
