package countwright.model;

/**
 * What a model expects in one row, with intervals for the mean (not for a future count, which varies more).
 *
 * @param row the row of the table predicted for, counted from 0
 * @param exposure the exposure of the row, or 1 where there is none
 * @param mean the expected count, {@code rate * exposure}
 * @param meanLower lower end of the interval for the expected count
 * @param meanUpper upper end of the interval for the expected count
 * @param rate the expected count per unit of exposure
 * @param rateLower lower end of the interval for the rate
 * @param rateUpper upper end of the interval for the rate
 */
public record Prediction(
        int row,
        double exposure,
        double mean,
        double meanLower,
        double meanUpper,
        double rate,
        double rateLower,
        double rateUpper) {}
