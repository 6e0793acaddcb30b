package countwright.model;

/**
 * The rate where every linear term is 0 and every factor at its reference level.
 *
 * @param rate the estimate, per unit of exposure, or the mean count where the model has no exposure
 * @param lower lower end of the interval
 * @param upper upper end of the interval
 */
public record BaselineRate(double rate, double lower, double upper) {}
