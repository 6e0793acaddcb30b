package countwright.chart;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.util.List;
import org.junit.jupiter.api.Test;

class AxisTest {

    @Test
    void linearTicks_tinyRange_arePlainDecimals() {
        assertThat(labels(Axis.linearWithRoomAtZero("", 0.0079, 5)))
                .containsExactly("0.000", "0.002", "0.004", "0.006", "0.008");
    }

    @Test
    void linearTicks_thousands_haveCommas() {
        assertThat(labels(Axis.linearWithRoomAtZero("", 4000, 5))).contains("1,000", "4,000");
    }

    @Test
    void linearTicks_negative_useAMinus() {
        assertThat(labels(Axis.linear("", -3, 3, 6))).contains("\u22122", "0", "2");
    }

    @Test
    void logTicks_oneDecade_areOneTwoFive() {
        assertThat(labels(Axis.log("", 0.5, 5, 8))).containsExactly("0.5", "1", "2", "5");
    }

    @Test
    void logTicks_manyDecades_keepToPowersOfTen() {
        assertThat(labels(Axis.log("", 1, 1e8, 6))).contains("100", "10,000").doesNotContain("2", "10");
    }

    @Test
    void linear_singleValue_hasARangeAroundIt() {
        Axis axis = Axis.linear("", 15, 15, 6);

        assertThat(axis.min()).isLessThan(15);
        assertThat(axis.max()).isGreaterThan(15);
    }

    @Test
    void axis_withoutRange_isRefused() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new Axis("", Axis.Scale.LINEAR, 1, Double.NaN, List.of()))
                .withMessageContaining("1.0 to NaN");
    }

    private static List<String> labels(Axis axis) {
        return axis.ticks().stream().map(Axis.Tick::label).toList();
    }
}
