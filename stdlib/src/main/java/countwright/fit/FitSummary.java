package countwright.fit;

/**
 * The likelihood and the measures of fit at the estimate.
 *
 * @param rows number of rows
 * @param informativeRows rows whose mean is not determined to be 0 by an unbounded column
 * @param estimated number of coefficients estimated
 * @param totalCount sum of the counts
 * @param logLikelihood complete log-likelihood
 * @param deviance deviance
 * @param nullDeviance deviance of a baseline alone, with the same offsets
 * @param pearsonChiSquare sum of squared Pearson residuals
 */
public record FitSummary(
        int rows,
        long informativeRows,
        int estimated,
        double totalCount,
        double logLikelihood,
        double deviance,
        double nullDeviance,
        double pearsonChiSquare) {}
