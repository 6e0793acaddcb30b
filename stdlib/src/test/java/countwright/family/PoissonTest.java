package countwright.family;

import static countwright.reference.Digits.assertDigits;
import static org.assertj.core.api.Assertions.assertThat;

import countwright.reference.PublishedData;
import countwright.table.Table;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class PoissonTest {

    private static final Family POISSON = Family.poisson();

    @Test
    void logDensity_countsUpToATrillion_agreesWithHighPrecision() {
        Table reference = PublishedData.table("poisson-density");
        assertThat(reference.rowCount()).isEqualTo(130);
        for (int row = 0; row < reference.rowCount(); row++) {
            double y = reference.numbers("y").value(row);
            double mu = reference.numbers("mu").value(row);
            double expected = reference.numbers("log_density").value(row);
            assertDigits("y " + y + ", mu " + mu, expected, POISSON.logDensity(y, mu), 13.5);
        }
    }

    @Test
    void unitDeviance_meanNearTheCount_keepsItsDigits() {
        Table reference = PublishedData.table("poisson-density");
        for (int row = 0; row < reference.rowCount(); row++) {
            double y = reference.numbers("y").value(row);
            double mu = reference.numbers("mu").value(row);
            double expected = reference.numbers("unit_deviance").value(row);
            assertDigits("y " + y + ", mu " + mu, expected, POISSON.unitDeviance(y, mu), 14);
        }
    }

    @Test
    void logDensity_overAllCounts_sumsToOne() {
        double sum = 0;
        for (int y = 0; y < 200; y++) {
            sum += Math.exp(POISSON.logDensity(y, 37.5));
        }
        assertDigits(1, sum, 14);
    }

    @Test
    void score_isTheDerivativeOfTheLogDensity() {
        double eta = 1.7;
        double step = 1e-5;
        double difference = POISSON.logDensity(4, Math.exp(eta + step)) - POISSON.logDensity(4, Math.exp(eta - step));
        assertDigits(difference / (2 * step), POISSON.score(4, Math.exp(eta)), 8);
    }

    @Test
    void unitDeviance_notANumber_returnsNotANumber() {
        assertThat(POISSON.unitDeviance(3, Double.NaN)).isNaN();
    }

    @ParameterizedTest
    @ValueSource(doubles = {0.01, 0.7, 5, 40})
    void squaredResidual_momentsAreThoseOfTheDistribution(double mu) {
        double mean = 0;
        double square = 0;
        double withScore = 0;
        for (int y = 0; y < 400; y++) {
            double p = Math.exp(POISSON.logDensity(y, mu));
            double r2 = (y - mu) * (y - mu) / POISSON.variance(mu);
            mean += p * r2;
            square += p * r2 * r2;
            withScore += p * r2 * POISSON.score(y, mu);
        }
        assertDigits(1, mean, 12);
        assertDigits(square - mean * mean, POISSON.squaredResidualVariance(mu), 10);
        assertDigits(withScore, POISSON.squaredResidualWithScore(mu), 10);
    }
}
