package countwright.reference;

import static countwright.reference.Digits.agreement;
import static countwright.reference.Digits.assertDigits;
import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;

class DigitsTest {

    @Test
    void agreement_relativeDifferenceOfOneInThousand_isThreeDigits() {
        assertThat(agreement(2000, 2002)).isCloseTo(3, within(1e-9));
        assertThat(agreement(-0.002, -0.001998)).isCloseTo(3, within(1e-9));
    }

    @Test
    void agreement_expectedZero_usesTheAbsoluteDifference() {
        assertThat(agreement(0, 1e-12)).isCloseTo(12, within(1e-9));
    }

    @Test
    void agreement_oppositeSigns_isNone() {
        assertThat(agreement(1, -1)).isNegative();
    }

    @Test
    void agreement_equalOrBothNotNumbers_isExact() {
        assertThat(agreement(0.1, 0.1)).isEqualTo(Digits.EXACT);
        assertThat(agreement(Double.NaN, Double.NaN)).isEqualTo(Digits.EXACT);
        assertThat(agreement(Double.POSITIVE_INFINITY, Double.POSITIVE_INFINITY))
                .isEqualTo(Digits.EXACT);
    }

    @Test
    void agreement_onlyOneFinite_isNone() {
        assertThat(agreement(1, Double.NaN)).isZero();
        assertThat(agreement(Double.NaN, 1)).isZero();
        assertThat(agreement(1e308, Double.POSITIVE_INFINITY)).isZero();
        assertThat(agreement(Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY))
                .isZero();
    }

    @Test
    void assertDigits_tooFew_saysWhatWasWantedAndFound() {
        assertDigits(1, 1.001, 2.9);
        assertThatThrownBy(() -> assertDigits("deviance", 1, 1.001, 10))
                .isInstanceOf(AssertionError.class)
                .hasMessageContaining("deviance")
                .hasMessageContaining("expected: 1.0")
                .hasMessageContaining("actual:   1.001")
                .hasMessageContaining("digits wanted: 10.0")
                .hasMessageContaining("digits found:  3.0");
    }
}
