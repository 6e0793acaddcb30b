package countwright.fit;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.math.BigDecimal;
import java.math.MathContext;
import java.util.Random;
import org.junit.jupiter.api.Test;

class TwofoldTest {

    private static final MathContext PRECISE = new MathContext(60);

    @Test
    void arithmetic_randomOperands_has30Digits() {
        Random random = new Random(3);
        for (int trial = 0; trial < 200; trial++) {
            Twofold a = Twofold.sum(random.nextGaussian(), 1e-17 * random.nextGaussian());
            Twofold b = Twofold.sum(random.nextGaussian(), 1e-17 * random.nextGaussian());
            assertClose(exact(a).multiply(exact(b)), a.times(b));
            assertClose(exact(a).divide(exact(b), PRECISE), a.over(b));
            Twofold square = a.times(a);
            assertClose(exact(square).sqrt(PRECISE), square.root());
        }
    }

    @Test
    void minus_nearlyEqual_keepsWhatIsLeft() {
        Twofold third = new Twofold(1, 0).over(new Twofold(3, 0));
        Twofold rest = new Twofold(1, 0).minus(third.plus(third).plus(third));
        assertThat(rest.value()).isCloseTo(0, within(1e-31));
    }

    @Test
    void sums_termsThatCancel_keepTheSmallOne() {
        TwofoldSums sums = new TwofoldSums(1);
        sums.add(0, 1e16);
        sums.add(0, 1);
        sums.addProduct(0, -1e8, 1e8);
        assertThat(sums.value(0)).isEqualTo(1);
    }

    @Test
    void sums_merged_equalThoseAddedInOne() {
        TwofoldSums first = new TwofoldSums(1);
        TwofoldSums second = new TwofoldSums(1);
        for (int i = 0; i < 1000; i++) {
            first.addProduct(0, 0.1, 0.1);
            second.addProduct(0, -0.1, 0.1);
        }
        first.merge(second);
        assertThat(first.value(0)).isZero();
    }

    private static BigDecimal exact(Twofold x) {
        return new BigDecimal(x.high()).add(new BigDecimal(x.low()));
    }

    private static void assertClose(BigDecimal expected, Twofold actual) {
        BigDecimal relative = expected.subtract(exact(actual)).abs().divide(expected.abs(), PRECISE);
        assertThat(relative).isLessThan(new BigDecimal("1e-30"));
    }
}
