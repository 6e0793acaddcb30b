package countwright.chart;

import countwright.show.Numbers;

/**
 * The amount of exposure rates are given for, such that they are easy to read: 1, or a thousand, a hundred thousand, a
 * million and so on, as in the tables of a model, where the rates would otherwise be small fractions.
 */
record RateUnit(String countName, String exposureName, double factor) {

    private static final double[] FACTORS = {1, 1e3, 1e5, 1e6, 1e9, 1e12};
    private static final double LARGE_ENOUGH = 0.1;

    /** Returns the unit for rates of which the largest is given; an empty exposure name means mean counts. */
    static RateUnit forRates(String countName, String exposureName, double largest) {
        if (exposureName.isEmpty() || largest >= LARGE_ENOUGH || !(largest > 0)) {
            return new RateUnit(countName, exposureName, 1);
        }
        double factor = FACTORS[FACTORS.length - 1];
        for (int i = FACTORS.length - 1; i >= 0; i--) {
            if (FACTORS[i] * largest >= 1) {
                factor = FACTORS[i];
            }
        }
        return new RateUnit(countName, exposureName, factor);
    }

    /** Returns what is measured, such as "faults per 1,000 vehicleKm". */
    String label() {
        if (exposureName.isEmpty()) {
            return "mean " + countName;
        }
        return countName + " per " + (factor == 1 ? "" : Numbers.compact(factor) + " ") + exposureName;
    }

    double[] scaled(double[] rates) {
        double[] scaled = rates.clone();
        for (int i = 0; i < scaled.length; i++) {
            scaled[i] *= factor;
        }
        return scaled;
    }

    String text(double rate) {
        return Numbers.significant(rate * factor, 3);
    }

    /** Returns an estimate with its interval, such as "4.21 (3.10 to 5.60)". */
    String text(double rate, double lower, double upper) {
        return text(rate) + " (" + interval(lower, upper) + ")";
    }

    /** Returns an interval, such as "3.10 to 5.60". */
    String interval(double lower, double upper) {
        return Numbers.interval(lower * factor, upper * factor);
    }
}
