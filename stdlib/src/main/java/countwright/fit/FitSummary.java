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
 * @param pearsonSpread standard deviation of pearsonChiSquare where the model holds: near {@code sqrt(2 df)} for counts
 *     that are not small, more where small means differ between rows; 0 where no degree of freedom is left
 */
public record FitSummary(
        int rows,
        long informativeRows,
        int estimated,
        double totalCount,
        double logLikelihood,
        double deviance,
        double nullDeviance,
        double pearsonChiSquare,
        double pearsonSpread) {}
