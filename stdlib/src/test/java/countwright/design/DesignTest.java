package countwright.design;

import static countwright.design.Terms.interaction;
import static countwright.design.Terms.levels;
import static countwright.design.Terms.linear;
import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import countwright.fit.Accumulator;
import countwright.fit.Block;
import countwright.fit.Strip;
import countwright.table.DateColumn;
import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.time.LocalDate;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;

class DesignTest {

    private static final Table TABLE = Table.of(
            NumberColumn.of("age", 1.5, 2, 3, 4),
            TextColumn.of("depot", "Mill", "Harbour", "Quayside", "Mill"),
            TextColumn.of("door", "Folding", "Sliding", "Sliding", "Sliding"),
            NumberColumn.of("line", 10, 9, 2, 10),
            DateColumn.of(
                    "day",
                    LocalDate.of(2024, 5, 2),
                    LocalDate.of(2024, 5, 1),
                    LocalDate.of(2024, 5, 2),
                    LocalDate.of(2024, 5, 3)));

    @Test
    void learn_linearAndLevels_codesAgainstTheReference() {
        assertRows(
                List.of(linear("age"), levels("depot").reference("Mill")),
                "baseline, age (per 1), depot Harbour vs Mill, depot Quayside vs Mill",
                new double[][] {{1, 1.5, 0, 0}, {1, 2, 1, 0}, {1, 3, 0, 1}, {1, 4, 0, 0}});
    }

    @Test
    void learn_levelsOfNumbers_areInAscendingOrderBySize() {
        Design design = Design.learn(List.of(levels("line")), TABLE);
        assertThat(design.factors().get(0).levels()).containsExactly("2", "9", "10");
        assertThat(design.columnNames()).containsExactly("baseline", "line 9 vs 2", "line 10 vs 2");
        assertThat(Design.learn(List.of(levels("line").reference(10)), TABLE).columnNames())
                .containsExactly("baseline", "line 2 vs 10", "line 9 vs 10");
    }

    @Test
    void learn_levelsOfDates_areInAscendingOrder() {
        assertThat(Design.learn(List.of(levels("day")), TABLE).columnNames())
                .containsExactly("baseline", "day 2024-05-02 vs 2024-05-01", "day 2024-05-03 vs 2024-05-01");
    }

    @Test
    void learn_linearByLevels_addsSlopeDifferencesOnly() {
        assertRows(
                List.of(linear("age"), interaction(linear("age"), levels("door").reference("Sliding"))),
                "baseline, age (per 1), age (per 1) × door Folding vs Sliding",
                new double[][] {{1, 1.5, 1.5}, {1, 2, 0}, {1, 3, 0}, {1, 4, 0}});
    }

    @Test
    void learn_levelsByLevels_addsPairsWithoutAReference() {
        assertRows(
                List.of(interaction(levels("depot"), levels("door"))),
                "baseline, depot Mill vs Harbour × door Sliding vs Folding,"
                        + " depot Quayside vs Harbour × door Sliding vs Folding",
                new double[][] {{1, 0, 0}, {1, 0, 0}, {1, 0, 1}, {1, 1, 0}});
    }

    @Test
    void learn_linearByLinear_multiplies() {
        assertRows(
                List.of(interaction(linear("age"), linear("line")), interaction(linear("age"), linear("age"))),
                "baseline, age (per 1) × line (per 1), age² (per 1)",
                new double[][] {{1, 15, 2.25}, {1, 18, 4}, {1, 6, 9}, {1, 40, 16}});
    }

    @Test
    void learn_interactionWithoutReference_takesThatOfTheMainTerm() {
        Design design = Design.learn(
                List.of(
                        interaction(linear("age"), levels("door")),
                        levels("door").reference("Sliding")),
                TABLE);
        assertThat(design.columnNames().get(1)).endsWith("Folding vs Sliding");
    }

    @Test
    void learn_levelsWithoutRows_areNotLevels() {
        Table chosen = TABLE.where(row -> !row.text("depot").equals("Harbour"));
        assertThat(Design.learn(List.of(levels("depot")), chosen).columnNames())
                .containsExactly("baseline", "depot Quayside vs Mill");
    }

    @Test
    void rows_unseenLevel_namesRowLevelAndKnownLevels() {
        Design design = Design.learn(List.of(levels("depot")), TABLE);
        Table other = Table.of(TextColumn.of("depot", "Mill", "Quaysyde"));
        assertThatThrownBy(() -> design.rows(other, row -> 0, row -> 0))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("row 2 of column 'depot'")
                .hasMessageContaining("'Quaysyde'")
                .hasMessageContaining("Harbour, Mill, Quayside")
                .hasMessageContaining("Did you mean 'Quayside'?");
    }

    @Test
    void rows_otherTable_isCodedAsLearned() {
        Design design = Design.learn(List.of(levels("line")), TABLE);
        Table asText = Table.of(TextColumn.of("line", "10", "2"));
        assertThat(dense(design, asText)).isDeepEqualTo(new double[][] {{1, 0, 1}, {1, 0, 0}});
    }

    @Test
    void learn_unknownReference_asksWhatWasMeant() {
        assertThatThrownBy(() -> Design.learn(List.of(levels("depot").reference("Harbor")), TABLE))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("no level 'Harbor'")
                .hasMessageContaining("Harbour, Mill, Quayside")
                .hasMessageContaining("Did you mean 'Harbour'?");
    }

    @Test
    void interaction_ofLevelsWithThemselves_isRefused() {
        assertThatThrownBy(() -> interaction(levels("door"), levels("door").reference("Sliding")))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("levels(\"door\") with itself");
    }

    private static void assertRows(List<Term> terms, String names, double[][] expected) {
        Design design = Design.learn(terms, TABLE);
        assertThat(String.join(", ", design.columnNames())).isEqualTo(names);
        assertThat(dense(design, TABLE)).isDeepEqualTo(expected);
    }

    private static double[][] dense(Design design, Table table) {
        return design.rows(table, row -> 0, row -> 0)
                .fold(() -> new Dense(design.columnCount()))
                .rows
                .toArray(new double[0][]);
    }

    /** Writes the design out, which nothing but a test should do. */
    private static final class Dense implements Accumulator<Dense> {

        private final int columnCount;
        private final List<double[]> rows = new ArrayList<>();

        Dense(int columnCount) {
            this.columnCount = columnCount;
        }

        @Override
        public void add(Block block) {
            for (int row = 0; row < block.size(); row++) {
                double[] dense = new double[columnCount];
                for (Strip strip : block.strips()) {
                    if (strip.columns()[row] != Strip.NONE) {
                        dense[strip.columns()[row]] += strip.values()[row];
                    }
                }
                rows.add(dense);
            }
        }

        @Override
        public void merge(Dense later) {
            rows.addAll(later.rows);
        }
    }
}
