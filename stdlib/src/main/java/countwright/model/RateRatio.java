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
public record RateRatio(String name, double ratio, double lower, double upper, double pValue) {}
