/**
 * The estimators: folds over blocks of rows, a solve, a step, and a verdict on convergence. Knows blocks and families, no
 * names, no tables.
 *
 * <p>Read {@link countwright.fit.RowSource} and {@link countwright.fit.Block}, then
 * {@link countwright.fit.MaximumLikelihood}. Sources: McCullagh and Nelder 1989, section 2.5 (scoring); N. J. Higham,
 * <em>Accuracy and Stability of Numerical Algorithms</em>, 2nd ed., 2002, chapter 10 (pivoted Cholesky); T. Ogita, S. M. Rump
 * and S. Oishi, <em>Accurate Sum and Dot Product</em>, SIAM J. Sci. Comput. 26, 2005 (compensated sums).
 */
@NullMarked
package countwright.fit;

import org.jspecify.annotations.NullMarked;
