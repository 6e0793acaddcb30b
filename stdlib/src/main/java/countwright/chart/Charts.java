package countwright.chart;

import countwright.model.FittedModel;
import countwright.model.Residual;
import countwright.table.Table;
import java.util.List;
import java.util.Optional;

/**
 * The figures. Each factory returns a {@link Chart} to show or save:
 *
 * <pre>{@code
 * show(Charts.fitted(model, "age"));
 * Charts.rates(faults, "faults", "vehicleKm", "depot").save("depots.svg");
 * }</pre>
 *
 * <p>Rates are given per 1, 1,000, 100,000, 1,000,000 … units of exposure, whichever reads best; the axis says which. All
 * factories throw {@link IllegalArgumentException} where there is nothing to draw, saying why.
 */
public final class Charts {

    private Charts() {}

    /**
     * Returns what the model fits over one covariate, with the interval of the mean (at the model's confidence level) and
     * what was observed. The rate is per unit of exposure; without exposure it is the mean count.
     *
     * <p>Other covariates are held at a typical value: the median of a number (the lower one of two), the most frequent
     * level of anything else, the first in order where two are equally frequent. The caption names them.
     *
     * <p>A covariate taken as a number gives a curve. Points are single rows, or with more than 60 rows 20 bins with about
     * equal numbers of rows, each at the mean of the covariate weighted by exposure. Where the model has no other
     * covariate a point is the observed rate: all events over all exposure. Where it has, a point is adjusted to the
     * values held, as {@code fitted rate * observed events / fitted events}, so that its distance from the curve shows
     * where the model misses and nothing else.
     *
     * <p>A covariate taken as levels gives one estimate and one observed rate (all events over all exposure, not
     * adjusted) for each level, the highest estimate on top; of more than 60 levels those with most exposure.
     *
     * @param covariate name of a column that some term of the model reads
     * @throws IllegalArgumentException if no term reads that column, naming those that some term reads
     */
    public static Chart fitted(FittedModel model, String covariate) {
        return FittedChart.of(Fit.of(model), covariate);
    }

    /** Returns the deviance residuals of each row against its fitted mean; see {@link #residuals(FittedModel, Residual)}. */
    public static Chart residuals(FittedModel model) {
        return residuals(model, Residual.DEVIANCE);
    }

    /**
     * Returns the residuals of a kind against fitted means, with guides at 0 and ±2. The vertical axis holds every
     * residual; the horizontal is logarithmic where the means differ by more than a factor of 20. From 100
     * rows on, averages of 20 bins with about equal numbers of rows show a trend. Of more than 6,000 rows an even share is
     * drawn, and every row beyond ±3.
     */
    public static Chart residuals(FittedModel model, Residual kind) {
        return ResidualChart.of(Fit.of(model), kind);
    }

    /**
     * Returns the variance of counts against their mean, one point for each group of rows, beside the line on which
     * Poisson counts lie. The variance is the sample variance, with divisor {@code n - 1}.
     *
     * @param countColumn whole numbers from 0
     * @param groupColumn rows with the same value form a group; groups of one row or without events are not shown
     */
    public static Chart meanVariance(Table table, String countColumn, String groupColumn) {
        return meanVariance(table, countColumn, Optional.empty(), groupColumn);
    }

    /**
     * Returns the same for counts of unequal exposure. With counts {@code y_i}, exposures {@code t_i} and the group's rate
     * {@code r = sum y / sum t}, row i is expected to count {@code m_i = r t_i}, and the group is shown at
     *
     * <pre>{@code
     * mean     = sum y / n
     * variance = mean * sum((y_i - m_i)^2 / m_i) / (n - 1)
     * }</pre>
     *
     * which is the sample variance where exposures are equal, and lies on the line variance = mean on average where counts
     * are Poisson with one rate in the group.
     */
    public static Chart meanVariance(Table table, String countColumn, String exposureColumn, String groupColumn) {
        return meanVariance(table, countColumn, Optional.of(exposureColumn), groupColumn);
    }

    /**
     * Returns the variance of counts around the means a model fits, by group: {@code mean} is the average fitted mean
     * {@code m_i} and {@code variance = mean * sum((y_i - m_i)^2 / m_i) / (n d)}, where {@code d}, the residual degrees of
     * freedom over the number of rows, allows for the coefficients estimated. Points above the line say that counts vary
     * more than Poisson counts with these means.
     *
     * @param groupColumn a column of the table the model was fitted to; it need not be in the model
     */
    public static Chart meanVariance(FittedModel model, String groupColumn) {
        return meanVariance(Fit.of(model), groupColumn);
    }

    /**
     * Returns the observed rate of each group (all events over all exposure) with its exact 95% interval for Poisson
     * counts (Garwood 1936), the highest rate on top. Of more than 60 groups those with the largest exposure are shown.
     * Rows with a missing value are left out, and the caption says how many.
     *
     * @param count column of whole numbers from 0
     * @param exposure column of positive amounts
     * @param group column of any kind; rows with the same value form a group
     * @throws IllegalArgumentException if a column is unknown, or a count or exposure is out of range, naming the row
     */
    public static Chart rates(Table table, String count, String exposure, String group) {
        return RateChart.of(table, count, exposure, group);
    }

    /** Returns the rate ratios of a model with their intervals on a log axis, in the order of its terms, 60 at most. */
    public static Chart rateRatios(FittedModel model) {
        return RateRatioChart.of(Fit.of(model));
    }

    private static Chart meanVariance(
            Table table, String countColumn, Optional<String> exposureColumn, String groupColumn) {
        Counted counted = Counted.read(table, countColumn, exposureColumn, groupColumn);
        List<Groups.Group> groups = Groups.byValue(counted.table().column(groupColumn));
        double[] means = MeanVarianceChart.meansAtGroupRate(groups, counted.counts(), counted.exposures());
        String definition = exposureColumn
                .map(name -> "Variance: around what each row would count at the group's rate, given its " + name
                        + ", brought to the group's mean count.")
                .orElse("Variance: sample variance within the group.");
        return MeanVarianceChart.of(
                countColumn,
                groupColumn,
                groups.size(),
                MeanVarianceChart.spreads(groups, counted.counts(), means, Double.NaN),
                definition + counted.leftOutSentence());
    }

    static Chart meanVariance(Fit fit, String groupColumn) {
        List<Groups.Group> groups = Groups.byValue(fit.table().column(groupColumn));
        int unnamed = fit.table().column(groupColumn).missingCount();
        double rowsLost = (double) fit.coefficients() / fit.table().rowCount();
        return MeanVarianceChart.of(
                fit.response(),
                groupColumn,
                groups.size(),
                MeanVarianceChart.spreads(
                        groups, fit.counts().get(), fit.means().get(), rowsLost),
                "Variance: around the fitted mean of each row, brought to the average fitted mean of the group."
                        + (unnamed == 0 ? "" : " Rows without a value in " + groupColumn + " are left out."));
    }
}
