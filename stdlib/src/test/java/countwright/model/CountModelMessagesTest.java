package countwright.model;

import static countwright.design.Terms.levels;
import static countwright.design.Terms.linear;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.util.Arrays;
import java.util.stream.IntStream;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;

/** What a newcomer gets wrong: each message names the thing, the place and the remedy. */
class CountModelMessagesTest {

    private static final Table TABLE = Table.of(
            NumberColumn.of("faults", 1, 2, 3, 4),
            NumberColumn.of("negative", 1, -2, 3, -1),
            NumberColumn.of("broken", 1, 2, 2.5, 1),
            NumberColumn.of("endless", 1, 2, 3, Double.POSITIVE_INFINITY),
            NumberColumn.of("none", 0, 0, 0, 0),
            NumberColumn.of("km", 5, 0, 7, 1),
            NumberColumn.of("absent", Double.NaN, Double.NaN, Double.NaN, Double.NaN),
            NumberColumn.of("huge", 1e60, 1, 2, 3),
            NumberColumn.of("nothing", 1e-120, 2e-120, 1e-120, 4e-120),
            NumberColumn.of("same", 4, 4, 4, 4),
            TextColumn.of("depot", "a", "b", "c", "a"),
            TextColumn.of("city", "x", "x", "x", "x"));

    static Stream<Arguments> faults() {
        return Stream.of(
                Arguments.of(CountModel.of("fault"), "no column 'fault'"),
                Arguments.of(CountModel.of("depot"), "the response 'depot' in table holds text"),
                Arguments.of(
                        CountModel.of("negative"), "row 2 of column 'negative' in table is -2 (and 1 more like it)"),
                Arguments.of(CountModel.of("negative"), "table.where(row -> row.number(\"negative\") >= 0)"),
                Arguments.of(CountModel.of("broken"), "row 3 of column 'broken' in table is 2.5"),
                Arguments.of(CountModel.of("broken"), "counts are whole numbers"),
                Arguments.of(CountModel.of("endless"), "row 4 of column 'endless' in table is Infinity"),
                Arguments.of(CountModel.of("none"), "every count in 'none' is 0"),
                Arguments.of(CountModel.of("absent"), "no row of table has all the values the model needs"),
                Arguments.of(CountModel.of("faults").exposure("km"), "row 2 of column 'km' in table is 0"),
                Arguments.of(CountModel.of("faults").exposure("km"), "table.where(row -> row.number(\"km\") > 0)"),
                Arguments.of(CountModel.of("faults").exposure("depot"), "the exposure 'depot' in table holds text"),
                Arguments.of(CountModel.of("faults").exposure("lm"), "no column 'lm'"),
                Arguments.of(CountModel.of("faults").offset("endless"), "lies from -230 to 230"),
                Arguments.of(CountModel.of("faults").offset("huge"), "row 1 of column 'huge' in table is 1.0E60"),
                Arguments.of(CountModel.of("faults").exposure("nothing"), "exposures lie from 1e-100 to 1e100"),
                Arguments.of(CountModel.of("faults").on(linear("huge")), "at most 1e50 in size"),
                Arguments.of(CountModel.of("faults").on(linear("nothing")), "no value above 1e-50"),
                Arguments.of(CountModel.of("faults").exposure("faults"), "cannot be its own exposure"),
                Arguments.of(CountModel.of("faults").exposure("km").offset("faults"), "cannot be its own offset"),
                Arguments.of(CountModel.of("faults").on(linear("depot")), "Use levels(\"depot\")"),
                Arguments.of(CountModel.of("faults").on(linear("same")), "every row used is 4"),
                Arguments.of(CountModel.of("faults").on(levels("city")), "every row used is 'x'"),
                Arguments.of(CountModel.of("faults").on(levels("dep")), "no column 'dep'"),
                Arguments.of(CountModel.of("faults").on(linear("faults")), "cannot explain itself"),
                Arguments.of(
                        CountModel.of("faults").on(linear("endless")),
                        "row 4 of column 'endless' in table is Infinity"),
                Arguments.of(
                        CountModel.of("faults").on(levels("depot"), linear("km"), linear("broken")),
                        "5 coefficients, but only 4 rows"));
    }

    @ParameterizedTest
    @MethodSource("faults")
    void fit_unusableInput_saysWhatWhereAndWhatToDo(CountModel model, String message) {
        assertThatThrownBy(() -> model.fit(TABLE))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining(message);
    }

    @Test
    void fit_noRows_isRefused() {
        assertThatThrownBy(() -> CountModel.of("faults").fit(TABLE.rows()))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("needs rows");
    }

    @Test
    void fit_quantityTakenAsLevels_isRefusedBeforeItTakesForever() {
        double[] serial = IntStream.range(0, 2500).asDoubleStream().toArray();
        double[] ones = new double[serial.length];
        Arrays.fill(ones, 1);
        Table vehicles = Table.of(NumberColumn.of("faults", ones), NumberColumn.of("serial", serial));
        assertThatThrownBy(() -> CountModel.of("faults").on(levels("serial")).fit(vehicles))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("2500 coefficients")
                .hasMessageContaining("levels(\"serial\") alone has 2500 levels")
                .hasMessageContaining("linear(…)");
    }

    @Test
    void at_percentInsteadOfFraction_saysHowToWriteIt() {
        FittedModel model = CountModel.of("faults").fit(TABLE);
        assertThatThrownBy(() -> model.at(95))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("write 0.95");
    }
}
