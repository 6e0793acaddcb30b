/**
 * The terms of a model and how they become columns of a design: linear effects, levels of a factor, interactions.
 *
 * <p>Read {@link countwright.design.Terms} for what a user writes and {@link countwright.design.Design} for how a table
 * is coded. A factor stays a column of codes; it is never expanded to indicator columns.
 */
@NullMarked
package countwright.design;

import org.jspecify.annotations.NullMarked;
