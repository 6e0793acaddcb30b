package countwright.chart;

import countwright.show.Numbers;
import countwright.show.RateUnit;
import java.util.Arrays;
import java.util.Optional;

/** How the rates of a figure are put into words and onto its axis. */
record RateText(String countName, RateUnit unit) {

    /** Returns the words for rates of which the largest is given; an empty exposure name means mean counts. */
    static RateText forRates(String countName, String exposureName, double largest) {
        Optional<String> exposure = exposureName.isEmpty() ? Optional.empty() : Optional.of(exposureName);
        return new RateText(countName, RateUnit.fitting(largest, exposure));
    }

    /** Returns what is measured, such as "faults per 1,000 vehicleKm" or "mean faults". */
    String label() {
        return unit.exposure().isEmpty() ? "mean " + countName : countName + unit.suffix();
    }

    double factor() {
        return unit.amount();
    }

    double[] scaled(double[] rates) {
        return Arrays.stream(rates).map(unit::scaled).toArray();
    }

    String text(double rate) {
        return Numbers.significant(unit.scaled(rate), 3);
    }

    /** Returns an estimate with its interval, such as "4.21 (3.10 to 5.60)". */
    String text(double rate, double lower, double upper) {
        return text(rate) + " (" + interval(lower, upper) + ")";
    }

    /** Returns an interval, such as "3.10 to 5.60". */
    String interval(double lower, double upper) {
        return Numbers.interval(unit.scaled(lower), unit.scaled(upper));
    }
}
