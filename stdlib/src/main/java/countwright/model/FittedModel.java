package countwright.model;

import countwright.design.Term;
import countwright.show.Displayable;
import countwright.show.Grid;
import countwright.show.MimeBundle;
import countwright.table.Table;
import java.util.List;

/** A count model fitted to a table by maximum likelihood. Immutable. */
public final class FittedModel implements Displayable {

    private final CountModel spec;
    private final Table table;

    FittedModel(CountModel spec, Table table) {
        this.spec = spec;
        this.table = table;
    }

    /** Returns the specification that was fitted. */
    public CountModel spec() {
        return spec;
    }

    /** Returns the terms, in the order given. */
    public List<Term> terms() {
        return spec.terms();
    }

    /** Returns the rows that were used: the table given, less the rows in which a value was missing. */
    public Table table() {
        return table;
    }

    /** Returns the number of rows used. */
    public int rowCount() {
        return table.rowCount();
    }

    /** Returns the counts, one for each row used. */
    public double[] counts() {
        return pending();
    }

    /** Returns the exposures, one for each row used; all 1 where the model has no exposure. */
    public double[] exposures() {
        return pending();
    }

    /** Returns the confidence level of intervals, 0.95 unless chosen. */
    public double level() {
        return pending();
    }

    /** Returns the same fit with intervals of another confidence level, above 0 and below 1. */
    public FittedModel at(double newLevel) {
        return pending();
    }

    /** Returns the rate ratios, in the order of the terms. */
    public List<RateRatio> rateRatios() {
        return pending();
    }

    /** Returns the coefficients on the log scale: the baseline first, then in the order of the terms. */
    public List<Coefficient> coefficients() {
        return pending();
    }

    /** Returns the coefficient of a name. */
    public Coefficient coefficient(String name) {
        return pending();
    }

    /** Returns the log-scale coefficients with their standard errors, to be shown. */
    public Grid coefficientTable() {
        return pending();
    }

    /** Returns the covariance matrix of the coefficients. */
    public Covariance covariance() {
        return pending();
    }

    /** Returns the maximised log-likelihood, complete with every constant. */
    public double logLikelihood() {
        return pending();
    }

    /** Returns the deviance: twice the log-likelihood by which a perfect fit would be better. */
    public double deviance() {
        return pending();
    }

    /** Returns the deviance of the model with a baseline rate only and the same exposure and offset. */
    public double nullDeviance() {
        return pending();
    }

    /** Returns the rows used less the coefficients estimated. */
    public int residualDegreesOfFreedom() {
        return pending();
    }

    /** Returns the sum of squared Pearson residuals. */
    public double pearsonChiSquare() {
        return pending();
    }

    /** Returns the Pearson chi-square divided by the residual degrees of freedom; near 1 if the variance is right. */
    public double dispersion() {
        return pending();
    }

    /** Returns Akaike's criterion, {@code -2 logLikelihood + 2 k}. */
    public double aic() {
        return pending();
    }

    /** Returns Schwarz's criterion, {@code -2 logLikelihood + k log(n)}. */
    public double bic() {
        return pending();
    }

    /** Returns the fitted mean counts, one for each row used. */
    public double[] fittedMeans() {
        return pending();
    }

    /** Returns the fitted rates: mean counts per unit of exposure, one for each row used. */
    public double[] fittedRates() {
        return pending();
    }

    /** Returns the residuals of a kind, one for each row used. */
    public double[] residuals(Residual kind) {
        return pending();
    }

    /** Returns the leverages, each between 0 and 1, that sum to the number of coefficients. */
    public double[] leverage() {
        return pending();
    }

    /** Returns Cook's distances, one for each row used. */
    public double[] cooksDistance() {
        return pending();
    }

    /** Returns predictions for the rows of a table, which needs the columns of the terms and, if it has it, the exposure. */
    public Predictions predict(Table scenarios) {
        return pending();
    }

    /** Returns what the reader should know about the fit: rows left out, columns dropped, doubtful estimates. */
    public List<String> notices() {
        return pending();
    }

    @Override
    public MimeBundle display() {
        return pending();
    }

    @SuppressWarnings("TypeParameterUnusedInFormals")
    private static <T> T pending() {
        throw new UnsupportedOperationException("not there yet");
    }
}
