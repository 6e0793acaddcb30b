/**
 * Count distributions with their links: log density, deviance, variance.
 *
 * <p>Read {@link countwright.family.Family}. Source: P. McCullagh and J. A. Nelder, <em>Generalized Linear Models</em>, 2nd
 * ed., 1989, chapters 2 and 6; C. Loader, <em>Fast and Accurate Computation of Binomial Probabilities</em>, 2000, for
 * densities that keep their digits at large counts.
 */
@NullMarked
package countwright.family;

import org.jspecify.annotations.NullMarked;
