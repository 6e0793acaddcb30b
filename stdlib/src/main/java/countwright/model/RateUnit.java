package countwright.model;

import countwright.show.Numbers;
import java.util.Arrays;
import java.util.Optional;

/**
 * The amount of exposure for which a rate is shown, so that a rate of 0.0000182 per vehicle-kilometre reads as 18.2 per
 * million. Only display is concerned; values are always per 1. The amounts are those of the charts, so that a table and a
 * chart of the same rates agree.
 *
 * @param amount 1, 1,000, 100,000, 1,000,000, …
 * @param exposure the column of exposures; without one a rate is a mean count
 */
record RateUnit(double amount, Optional<String> exposure) {

    private static final double[] AMOUNTS = {1, 1e3, 1e5, 1e6, 1e9, 1e12};

    /** Returns the smallest unit for which a rate reaches 1, or a single one if the rate is at least 0.1 as it is. */
    static RateUnit fitting(double rate, Optional<String> exposure) {
        if (exposure.isEmpty() || !(rate > 0) || rate >= 0.1) {
            return new RateUnit(1, exposure);
        }
        double amount = Arrays.stream(AMOUNTS)
                .filter(candidate -> rate * candidate >= 1)
                .findFirst()
                .orElse(AMOUNTS[AMOUNTS.length - 1]);
        return new RateUnit(amount, exposure);
    }

    double scaled(double rate) {
        return rate * amount;
    }

    /** Returns a heading such as "baseline rate per 1,000 vehicleKm", or "baseline mean" without exposure. */
    String label(String what) {
        return exposure.map(name -> what + " rate per " + (amount == 1 ? "" : Numbers.compact(amount) + " ") + name)
                .orElse(what + " mean");
    }
}
