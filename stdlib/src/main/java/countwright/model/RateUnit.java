package countwright.model;

import countwright.show.Numbers;
import java.util.Optional;

/**
 * The amount of exposure for which a rate is shown, so that a rate of 0.0000182 per vehicle-kilometre reads as 18.2 per
 * million. Only display is concerned; values are always per 1.
 *
 * @param amount 1, 1,000, 1,000,000, …
 * @param exposure the column of exposures; without one a rate is a mean count
 */
record RateUnit(double amount, Optional<String> exposure) {

    private static final double LARGEST = 1e12;

    /** Returns the smallest unit for which a rate reaches 1, or a single one if the rate is at least 0.1 as it is. */
    static RateUnit fitting(double rate, Optional<String> exposure) {
        double amount = 1;
        if (exposure.isPresent() && rate > 0 && rate < 0.1) {
            while (rate * amount < 1 && amount < LARGEST) {
                amount *= 1000;
            }
        }
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
