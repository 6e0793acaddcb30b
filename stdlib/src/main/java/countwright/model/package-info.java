/**
 * The specification of a count model and the answer of a fit: what users hold.
 *
 * <p>Read {@link countwright.model.CountModel} first, then {@link countwright.model.FittedModel}. Source: P. McCullagh and
 * J. A. Nelder, <em>Generalized Linear Models</em>, 2nd ed., 1989.
 */
@NullMarked
package countwright.model;

import org.jspecify.annotations.NullMarked;
