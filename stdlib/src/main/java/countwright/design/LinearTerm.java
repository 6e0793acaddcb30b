package countwright.design;

/**
 * A column of numbers that enters the linear predictor as it is: one coefficient, the change of the log rate per unit.
 *
 * @param column name of the column of numbers
 */
public record LinearTerm(String column) implements MainTerm {}
