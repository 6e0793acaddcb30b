package countwright.model;

import countwright.design.Design;
import countwright.design.Term;
import countwright.family.Family;
import countwright.fit.Convergence;
import countwright.fit.FitSummary;
import countwright.fit.RowFits;
import countwright.show.Displayable;
import countwright.show.Grid;
import countwright.show.MimeBundle;
import countwright.show.NearNames;
import countwright.show.Numbers;
import countwright.table.Table;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.function.IntToDoubleFunction;

/**
 * A count model fitted to a table by maximum likelihood. Immutable.
 *
 * <p>Arrays with one value for each row are in the order of {@link #table}, computed when first asked for, and copied out.
 * Coefficients that have no estimate (see {@link #notices}) appear in no list. Definitions follow P. McCullagh and J. A.
 * Nelder, <em>Generalized Linear Models</em>, 2nd ed., 1989; coefficients, standard errors, likelihoods and residuals agree
 * with values computed in 60-digit arithmetic to 10 significant digits or more on published data, which the tests hold.
 */
public final class FittedModel implements Displayable {

    /** Above this a leverage counts as 1: what would be left to divide by is rounding. */
    private static final double FULL_LEVERAGE = 1 - 1e-10;

    private final Fit fit;
    private final double level;

    FittedModel(Fit fit, double level) {
        this.fit = fit;
        this.level = level;
    }

    /** Returns the specification that was fitted. */
    public CountModel spec() {
        return fit.spec();
    }

    /** Returns the terms, in the order given. */
    public List<Term> terms() {
        return spec().terms();
    }

    /** Returns the terms bound to the table: factors with their levels and references, names of coefficients. */
    public Design design() {
        return fit.design();
    }

    /** Returns the rows that were used: the table given, less the rows in which a value was missing. */
    public Table table() {
        return fit.table();
    }

    /** Returns the number of rows used. */
    public int rowCount() {
        return fit.table().rowCount();
    }

    /** Returns the counts, one for each row used. */
    public double[] counts() {
        return table().numbers(spec().response()).toArray();
    }

    /** Returns the exposures, one for each row used; all 1 where the model has no exposure. */
    public double[] exposures() {
        return spec().exposure().map(name -> table().numbers(name).toArray()).orElseGet(() -> {
            double[] ones = new double[rowCount()];
            Arrays.fill(ones, 1);
            return ones;
        });
    }

    /** Returns the sum of the counts. */
    public double totalCount() {
        return summary().totalCount();
    }

    /** Returns the sum of the exposures. */
    public double totalExposure() {
        return Arrays.stream(exposures()).sum();
    }

    /** Returns how the estimation ended. */
    public Convergence convergence() {
        return fit.estimate().convergence();
    }

    /** Returns the confidence level of intervals, 0.95 unless chosen. */
    public double level() {
        return level;
    }

    /**
     * Returns the same fit with intervals of another confidence level.
     *
     * @throws IllegalArgumentException if the level is not above 0 and below 1
     */
    public FittedModel at(double newLevel) {
        Interval.halfWidth(newLevel);
        return new FittedModel(fit, newLevel);
    }

    /** Returns the rate ratios with Wald intervals, in the order of the terms. */
    public List<RateRatio> rateRatios() {
        double z = Interval.halfWidth(level);
        return coefficients().stream()
                .skip(1)
                .map(c -> new RateRatio(
                        c.name(),
                        Math.exp(c.estimate()),
                        Math.exp(c.estimate() - z * c.standardError()),
                        Math.exp(c.estimate() + z * c.standardError()),
                        Interval.twoSidedP(c.z())))
                .toList();
    }

    /** Returns the rate ratios and the baseline rate with their intervals, to be shown. */
    public Grid rateRatioTable() {
        return new ModelReport(this).ratios();
    }

    /** Returns the rate at the baseline, with its Wald interval. */
    public BaselineRate baselineRate() {
        double z = Interval.halfWidth(level);
        double estimate = fit.estimate().coefficient(0);
        double standardError = fit.standardError(0);
        return new BaselineRate(
                Math.exp(estimate), Math.exp(estimate - z * standardError), Math.exp(estimate + z * standardError));
    }

    /** Returns the coefficients on the log scale: the baseline first, then in the order of the terms. */
    public List<Coefficient> coefficients() {
        return Arrays.stream(fit.estimated())
                .mapToObj(column -> new Coefficient(
                        design().columnNames().get(column),
                        fit.estimate().coefficient(column),
                        fit.standardError(column)))
                .toList();
    }

    /**
     * Returns the coefficient of a name.
     *
     * @throws IllegalArgumentException if there is none
     */
    public Coefficient coefficient(String name) {
        List<Coefficient> all = coefficients();
        return all.stream()
                .filter(coefficient -> coefficient.name().equals(name))
                .findFirst()
                .orElseThrow(() ->
                        noCoefficient(name, all.stream().map(Coefficient::name).toList()));
    }

    /** Returns the log-scale coefficients with their standard errors, to be shown. */
    public Grid coefficientTable() {
        Grid grid = Grid.titled("Coefficients on the log scale")
                .textColumn("coefficient")
                .numberColumn("estimate")
                .numberColumn("standard error")
                .numberColumn("z")
                .numberColumn("p");
        for (Coefficient c : coefficients()) {
            grid = grid.row(
                    c.name(),
                    Numbers.estimate(c.estimate(), c.standardError()),
                    Numbers.significant(c.standardError(), 2),
                    Numbers.fixed(c.z(), 2),
                    Numbers.pValue(Interval.twoSidedP(c.z())));
        }
        for (String warning : Notices.ofConvergence(fit)) {
            grid = grid.note(warning);
        }
        return grid;
    }

    /** Returns the covariance matrix of the coefficients: the inverse of the Fisher information at the estimate. */
    public Covariance covariance() {
        int[] columns = fit.estimated();
        List<String> names = new ArrayList<>();
        double[][] values = new double[columns.length][columns.length];
        for (int i = 0; i < columns.length; i++) {
            names.add(design().columnNames().get(columns[i]));
            for (int j = 0; j < columns.length; j++) {
                values[i][j] = fit.estimate().covariance(columns[i], columns[j]);
            }
        }
        return new Covariance(names, values);
    }

    /** Returns the maximised log-likelihood, complete with every constant such as {@code -log(y!)}. */
    public double logLikelihood() {
        return summary().logLikelihood();
    }

    /** Returns the deviance: twice the log-likelihood by which a perfect fit would be better. */
    public double deviance() {
        return summary().deviance();
    }

    /** Returns the deviance of the model with a baseline rate only and the same exposure and offset. */
    public double nullDeviance() {
        return summary().nullDeviance();
    }

    /**
     * Returns the rows used less the coefficients estimated. Rows whose rate is estimated as 0 because their level has no
     * event bear on no coefficient and do not count.
     */
    public int residualDegreesOfFreedom() {
        return Math.toIntExact(summary().informativeRows() - summary().estimated());
    }

    /** Returns the sum of squared Pearson residuals. */
    public double pearsonChiSquare() {
        return summary().pearsonChiSquare();
    }

    /**
     * Returns the Pearson chi-square divided by the residual degrees of freedom; near 1 if the variance is right.
     *
     * @throws IllegalStateException if no degree of freedom is left
     */
    public double dispersion() {
        if (residualDegreesOfFreedom() <= 0) {
            throw new IllegalStateException(
                    "there are as many coefficients as rows, so there is no dispersion to estimate;"
                            + " use fewer terms.");
        }
        return pearsonChiSquare() / residualDegreesOfFreedom();
    }

    /** Returns Akaike's criterion, {@code -2 logLikelihood + 2 k}, with k the number of coefficients. */
    public double aic() {
        return -2 * logLikelihood() + 2 * parameters();
    }

    /** Returns Schwarz's criterion, {@code -2 logLikelihood + k log(n)}, with n the number of rows used. */
    public double bic() {
        return -2 * logLikelihood() + parameters() * Math.log(rowCount());
    }

    /** Returns the fitted mean counts, one for each row used. */
    public double[] fittedMeans() {
        RowFits fits = fit.rowFits();
        return perRow(fits::mean);
    }

    /** Returns the fitted rates: mean counts per unit of exposure, one for each row used. */
    public double[] fittedRates() {
        RowFits fits = fit.rowFits();
        double[] exposures = exposures();
        return perRow(row -> fits.mean(row) / exposures[row]);
    }

    /** Returns the residuals of a kind, one for each row used; see {@link Residual} for their definitions. */
    public double[] residuals(Residual kind) {
        RowFits fits = fit.rowFits();
        double[] counts = counts();
        Family family = spec().family();
        return perRow(row -> {
            double raw = kind.raw(family, counts[row], fits.mean(row));
            return kind.isStandardised() ? standardised(raw, leverage(fits, row)) : raw;
        });
    }

    /**
     * Returns the leverages {@code h = w x' C x}, with weight {@code w} and covariance {@code C}: each from 0 to 1, together
     * the number of coefficients.
     */
    public double[] leverage() {
        RowFits fits = fit.rowFits();
        return perRow(row -> leverage(fits, row));
    }

    /**
     * Returns Cook's distances {@code r² h / (p (1 - h)²)} with Pearson residual r, leverage h and p coefficients, one for
     * each row used; NaN where the leverage is 1. Source: R. D. Cook, <em>Detection of Influential Observation in Linear
     * Regression</em>, 1977; for generalized linear models McCullagh and Nelder 1989, section 12.7.
     */
    public double[] cooksDistance() {
        RowFits fits = fit.rowFits();
        double[] pearson = residuals(Residual.PEARSON);
        int coefficients = summary().estimated();
        return perRow(row -> {
            double h = leverage(fits, row);
            double left = 1 - h;
            return h > FULL_LEVERAGE ? Double.NaN : pearson[row] * pearson[row] * h / (coefficients * left * left);
        });
    }

    /**
     * Returns predictions for the rows of a table, with confidence intervals for the mean. The table needs the columns of
     * the terms and the offset; with the column of exposures each row has an expected count, else a rate per 1.
     *
     * @throws IllegalArgumentException if a column is missing, a value is missing or not permitted, or a level is not among
     *     those fitted; the message names the row and the value
     */
    public Predictions predict(Table scenarios) {
        return Predicting.predict(this, scenarios);
    }

    /** Returns what the reader must know about the fit: rows left out, columns dropped, doubtful estimates, dispersion. */
    public List<String> notices() {
        return Notices.of(this);
    }

    @Override
    public MimeBundle display() {
        return new ModelReport(this).bundle();
    }

    @Override
    public String toString() {
        return display().plainText();
    }

    Fit fit() {
        return fit;
    }

    private static IllegalArgumentException noCoefficient(String name, List<String> names) {
        String start = names.stream()
                .filter(full -> full.startsWith(name + " "))
                .findFirst()
                .map(full -> "Did you mean '" + full + "'?")
                .orElseGet(() -> NearNames.question(name, names));
        return new IllegalArgumentException("there is no coefficient '" + name + "'. "
                + (start.isEmpty() ? "" : start + " ") + "The coefficients are " + NearNames.list(names) + ".");
    }

    private FitSummary summary() {
        return fit.estimate().summary();
    }

    /** Returns the parameters of the model, those with an infinite estimate included: they were fitted too. */
    private int parameters() {
        return summary().estimated() + fit.unboundedCount();
    }

    private double leverage(RowFits fits, int row) {
        double mu = fits.mean(row);
        return mu == 0 ? 0 : spec().family().information(mu) * fits.variance(row);
    }

    private static double standardised(double residual, double leverage) {
        return leverage > FULL_LEVERAGE ? Double.NaN : residual / Math.sqrt(1 - leverage);
    }

    private double[] perRow(IntToDoubleFunction value) {
        double[] values = new double[rowCount()];
        Arrays.setAll(values, value);
        return values;
    }
}
