package countwright.show;

import java.util.Arrays;
import java.util.Optional;

/**
 * The amount of exposure for which a rate is shown, so that a rate of 0.0000182 per vehicle-kilometre reads as 18.2 per
 * million. Only display is concerned; values are always per 1. Tables and charts share these amounts, so that the same
 * rates read alike in both.
 *
 * @param amount 1, 1,000, 100,000, 1,000,000, …
 * @param exposure the column of exposures; without one a rate is a mean count
 */
public record RateUnit(double amount, Optional<String> exposure) {

    private static final double[] AMOUNTS = {1, 1e3, 1e5, 1e6, 1e9, 1e12};

    /** A rate that needs no larger unit than 1. */
    private static final double LARGE_ENOUGH = 0.1;

    /** Returns the smallest unit for which a rate reaches 1, or a single one if the rate is at least 0.1 as it is. */
    public static RateUnit fitting(double rate, Optional<String> exposure) {
        if (exposure.isEmpty() || !(rate > 0) || rate >= LARGE_ENOUGH) {
            return new RateUnit(1, exposure);
        }
        double amount = Arrays.stream(AMOUNTS)
                .filter(candidate -> rate * candidate >= 1)
                .findFirst()
                .orElse(AMOUNTS[AMOUNTS.length - 1]);
        return new RateUnit(amount, exposure);
    }

    /** Returns a rate per 1 as a rate per this amount. */
    public double scaled(double rate) {
        return rate * amount;
    }

    /** Returns what follows the name of a rate, such as " per 1,000 vehicleKm"; empty without exposure. */
    public String suffix() {
        return exposure.map(name -> " per " + (amount == 1 ? "" : Numbers.compact(amount) + " ") + name)
                .orElse("");
    }
}
