/**
 * Tables and their columns: reading files, looking at what was read, choosing rows.
 *
 * <p>Read {@link countwright.table.Table} first. Columns are typed, immutable and in memory; files are read by an
 * embedded DuckDB, whose types never appear in a signature.
 */
@NullMarked
package countwright.table;

import org.jspecify.annotations.NullMarked;
