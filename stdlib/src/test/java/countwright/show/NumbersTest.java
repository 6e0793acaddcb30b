package countwright.show;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.util.Locale;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class NumbersTest {

    @ParameterizedTest
    @CsvSource(delimiter = ';', textBlock = """
            1 ; 3 ; 1.00
            0.012345 ; 3 ; 0.0123
            12345.6 ; 3 ; 12,346
            -0.5 ; 2 ; -0.50
            999.96 ; 4 ; 1,000
            0.99996 ; 3 ; 1.00
            0 ; 3 ; 0.00
            0.00000123 ; 2 ; 1.2e-6
            1234567890123456789 ; 4 ; 1.235e18
            NaN ; 3 ; –
            Infinity ; 3 ; ∞
            -Infinity ; 3 ; -∞
            """)
    void significant_keepsTheDigitsAskedFor(double value, int digits, String text) {
        assertThat(Numbers.significant(value, digits)).isEqualTo(text);
    }

    @ParameterizedTest
    @CsvSource(delimiter = ';', textBlock = """
            0.0004 ; 2 ; 0.0004
            -0.0004 ; 2 ; -0.0004
            0.00000004 ; 2 ; 4e-8
            0 ; 3 ; 0.000
            1234.5678 ; 2 ; 1,234.57
            1e300 ; 2 ; 1.000e300
            """)
    void fixed_numberOtherThanZero_neverReadsAsZero(double value, int decimals, String text) {
        assertThat(Numbers.fixed(value, decimals)).isEqualTo(text);
    }

    @ParameterizedTest
    @CsvSource(delimiter = ';', textBlock = """
            1.23456 ; 0.0321 ; 1.235
            1.23456 ; 3.21 ; 1.2
            123456.7 ; 2345.6 ; 123,457
            0.00002 ; 0.5 ; 0.00002
            1.23456 ; NaN ; 1.235
            1.23456 ; 0 ; 1.235
            """)
    void estimate_decimalsFollowTheStandardError(double value, double standardError, String text) {
        assertThat(Numbers.estimate(value, standardError)).isEqualTo(text);
    }

    @ParameterizedTest
    @CsvSource(delimiter = ';', textBlock = """
            0.8712 ; 1.2345 ; 0.871 to 1.234
            1.0201 ; 1.0634 ; 1.020 to 1.063
            0 ; 3.68888 ; 0.00 to 3.69
            12.3 ; 1234.5 ; 12.3 to 1,234.5
            1 ; Infinity ; 1.00 to ∞
            """)
    void interval_bothEndsHaveTheSameDecimals(double lower, double upper, String text) {
        assertThat(Numbers.interval(lower, upper)).isEqualTo(text);
    }

    @ParameterizedTest
    @CsvSource(delimiter = ';', textBlock = """
            0 ; <0.0001
            0.00009 ; <0.0001
            0.00042 ; 0.0004
            0.0123 ; 0.012
            0.05 ; 0.050
            0.234 ; 0.23
            0.995 ; >0.99
            1 ; 1
            NaN ; –
            """)
    void pValue_isShortAndNeverZero(double p, String text) {
        assertThat(Numbers.pValue(p)).isEqualTo(text);
    }

    @Test
    void pValue_outsideItsRange_isRefusedWithTheValue() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> Numbers.pValue(1.5))
                .withMessageContaining("1.5");
    }

    @ParameterizedTest
    @CsvSource(delimiter = ';', textBlock = """
            0 ; 0%
            0.1234 ; 12.3%
            0.02 ; 2.0%
            0.0004 ; <0.1%
            0.9996 ; >99.9%
            1 ; 100%
            """)
    void percent_hasOneDecimalAndHonestEnds(double fraction, String text) {
        assertThat(Numbers.percent(fraction)).isEqualTo(text);
    }

    @ParameterizedTest
    @CsvSource(delimiter = ';', textBlock = """
            5479 ; 5,479
            0.25 ; 0.25
            3.14159 ; 3.142
            -2 ; -2
            1e-9 ; 1e-9
            """)
    void compact_leavesTrailingZerosOut(double value, String text) {
        assertThat(Numbers.compact(value)).isEqualTo(text);
    }

    @Test
    void count_withNoun_usesSingularForOneOnly() {
        assertThat(Numbers.count(1, "row")).isEqualTo("1 row");
        assertThat(Numbers.count(0, "row")).isEqualTo("0 rows");
        assertThat(Numbers.count(1_234_567, "row")).isEqualTo("1,234,567 rows");
    }

    @Test
    void significant_inALocaleWithDecimalComma_stillWritesAPoint() {
        Locale before = Locale.getDefault();
        try {
            Locale.setDefault(Locale.GERMANY);
            assertThat(Numbers.significant(1234.5, 6)).isEqualTo("1,234.50");
        } finally {
            Locale.setDefault(before);
        }
    }
}
