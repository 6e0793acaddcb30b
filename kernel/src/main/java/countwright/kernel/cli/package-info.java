/**
 * The command line: connect, run, register, unregister. Read {@link countwright.kernel.cli.Main} first.
 *
 * <p>Every command ends with one of three exit codes: 0 if it did its work, 1 if a cell of a notebook failed, 2 if it
 * could not run at all, be it for a wrong argument or for something outside the notebook. This is the only package that
 * writes to the terminal.
 */
@NullMarked
package countwright.kernel.cli;

import org.jspecify.annotations.NullMarked;
