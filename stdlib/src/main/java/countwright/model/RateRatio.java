package countwright.model;

/**
 * How many times the rate changes: per unit of a linear term, or from the reference to another level.
 *
 * @param name what it belongs to, such as "age (per 1)" or "depot Quayside vs Harbour"
 * @param ratio the estimate, {@code exp(coefficient)}
 * @param lower lower end of the interval
 * @param upper upper end of the interval
 * @param pValue two-sided p-value of the Wald test that the ratio is 1
 */
public record RateRatio(String name, double ratio, double lower, double upper, double pValue) {

    /** The quantile behind a 95% interval; rounding needs no more than the size of the standard error. */
    private static final double USUAL_QUANTILE = 1.96;

    /** Returns the ratio as tables and charts show it, to the decimals its uncertainty leaves it. */
    public String ratioText() {
        return rounded().estimate();
    }

    /** Returns the interval as tables and charts show it, such as "0.41 to 0.82"; an end near 1 keeps its side. */
    public String intervalText() {
        return rounded().interval();
    }

    private Rounded rounded() {
        double standardError = ratio * Math.log(upper / lower) / (2 * USUAL_QUANTILE);
        return Rounded.ofRatio(ratio, standardError, lower, upper);
    }
}
