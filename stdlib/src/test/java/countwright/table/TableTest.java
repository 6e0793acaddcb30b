package countwright.table;

import static countwright.table.Columns.dates;
import static countwright.table.Columns.numbers;
import static countwright.table.Columns.texts;
import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import countwright.show.MimeBundle;
import java.time.LocalDate;
import org.junit.jupiter.api.Test;

class TableTest {

    private static final Table FAULTS = Table.of(
            texts("depot", "Quayside", "Harbour", null, "Harbour"),
            numbers("vehicleKm", 120, 80.5, 60, Double.NaN),
            numbers("faults", 3, 0, 1, 0),
            dates("seen", LocalDate.of(2024, 3, 1), null, LocalDate.of(2023, 12, 31), LocalDate.of(2024, 1, 1)));

    @Test
    void column_misspelt_asksWhatWasMeantAndListsAll() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> FAULTS.column("vehicle_km"))
                .withMessage("there is no column 'vehicle_km' in table. Did you mean 'vehicleKm'?"
                        + " Its columns are depot, vehicleKm, faults, seen.");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> FAULTS.column("weather"))
                .withMessage("there is no column 'weather' in table. Its columns are depot, vehicleKm, faults, seen.");
    }

    @Test
    void numbers_ofText_namesFirstRowThatIsNoneAndTheWayOut() {
        Table table = Table.of(texts("age", "12", "unknown", "7"));

        assertThatIllegalArgumentException()
                .isThrownBy(() -> table.numbers("age"))
                .withMessageContainingAll("'age'", "text, not numbers", "row 2 is 'unknown'", "levels(\"age\")");
    }

    @Test
    void numbers_ofGroupedThousands_hintsAtTheSigns() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> Table.of(texts("km", "1,234,567")).numbers("km"))
                .withMessageContainingAll("row 1 is '1,234,567'", "thousands");
    }

    @Test
    void numbers_ofDates_saysHowToDerive() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> FAULTS.numbers("seen"))
                .withMessageContainingAll("'seen'", "dates, not numbers", "row.date(\"seen\")");
    }

    @Test
    void where_keepsMatchingRowsInOrder() {
        Table kept = FAULTS.where(row -> row.text("depot").equals("Harbour") || row.number("faults") > 2);

        assertThat(kept.numbers("faults").toArray()).containsExactly(3, 0, 0);
        assertThat(FAULTS.where(row -> false).rowCount()).isZero();
    }

    @Test
    void sortedBy_putsMissingLastEitherWay() {
        assertThat(FAULTS.sortedBy("vehicleKm").numbers("faults").toArray()).containsExactly(1, 0, 3, 0);
        assertThat(FAULTS.sortedDescendingBy("vehicleKm").numbers("faults").toArray())
                .containsExactly(3, 0, 1, 0);
        assertThat(FAULTS.sortedBy("depot").column("depot").text(0)).isEqualTo("Harbour");
        assertThat(FAULTS.sortedBy("seen").column("seen").text(0)).isEqualTo("2023-12-31");
        assertThat(FAULTS.sortedBy("seen").column("seen").isMissing(3)).isTrue();
    }

    @Test
    void sortedBy_signsZerosAndTies_keepTheirPlaces() {
        Table table = Table.of(
                numbers("x", 0.0, -1e300, 2, -0.0, Double.POSITIVE_INFINITY, -2, 2),
                numbers("at", 0, 1, 2, 3, 4, 5, 6));

        assertThat(table.sortedBy("x").numbers("at").toArray()).containsExactly(1, 5, 0, 3, 2, 6, 4);
        assertThat(table.sortedDescendingBy("x").numbers("at").toArray()).containsExactly(4, 2, 6, 0, 3, 5, 1);
    }

    @Test
    void select_keepsNamedColumnsInTheOrderGiven() {
        assertThat(FAULTS.select("faults", "depot").columnNames()).containsExactly("faults", "depot");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> FAULTS.select("fault"))
                .withMessageContaining("Did you mean 'faults'?");
    }

    @Test
    void with_derivesANumberForEachRow() {
        Table derived = FAULTS.with("logKm", row -> Math.log(row.number("vehicleKm")));

        assertThat(derived.numbers("logKm").value(0)).isEqualTo(Math.log(120));
        assertThat(derived.column("logKm").isMissing(3)).isTrue();
    }

    @Test
    void with_infiniteOrUncalledForNaN_namesTheRow() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> FAULTS.with("logFaults", row -> Math.log(row.number("faults"))))
                .withMessageContainingAll("'logFaults'", "-Infinity", "row 2");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> FAULTS.with("root", row -> Math.sqrt(-row.number("faults"))))
                .withMessageContainingAll("'root'", "NaN", "row 1");
    }

    @Test
    void withText_derivesLevels() {
        Table derived = FAULTS.withText("any", row -> row.number("faults") > 0 ? "some" : "none");

        assertThat(((TextColumn) derived.column("any")).levels()).containsExactly("none", "some");
    }

    @Test
    void date_missing_namesRowAndRemedy() {
        assertThat(new Row(FAULTS, 0).date("seen")).isEqualTo(LocalDate.of(2024, 3, 1));
        assertThatIllegalArgumentException()
                .isThrownBy(() -> new Row(FAULTS, 1).date("seen"))
                .withMessageContainingAll("'seen'", "row 2", "isMissing");
    }

    @Test
    void crossing_givesEveryCombination() {
        Table scenarios = Table.crossing(texts("depot", "Harbour", "Quayside"), numbers("age", 5, 10, 15));

        assertThat(scenarios.rowCount()).isEqualTo(6);
        assertThat(scenarios.numbers("age").toArray()).containsExactly(5, 10, 15, 5, 10, 15);
        assertThat(scenarios.column("depot").text(3)).isEqualTo("Quayside");
        assertThat(Table.crossing(numbers("a"), numbers("b", 1)).rowCount()).isZero();
    }

    @Test
    void of_unequalOrDoubledColumns_isRefused() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> Table.of(numbers("a", 1, 2), numbers("b", 1)))
                .withMessageContainingAll("'b' has 1", "'a' has 2");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> Table.of(numbers("a", 1), texts("a", "x")))
                .withMessageContaining("'a'");
    }

    @Test
    void rows_outOfRange_isRefused() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> FAULTS.rows(4))
                .withMessageContainingAll("no row 4", "4 rows");
    }

    @Test
    void display_showsKindsCountsAndMissing() {
        assertThat(FAULTS.toString())
                .startsWith("table: 4 rows, 4 columns\n")
                .contains("Harbour         80.5         0   –")
                .contains("numbers", "dates")
                .endsWith("– marks a missing value.");
        assertThat(FAULTS.display().get(MimeBundle.HTML).orElseThrow()).contains(">vehicleKm<", ">numbers</span>");
    }

    @Test
    void display_longTable_showsTheFirstRowsAndHeadShowsAllItHas() {
        Table squares = Table.of(NumberColumn.of(
                "n",
                java.util.stream.IntStream.range(1000, 4000).asDoubleStream().toArray()));

        assertThat(squares.toString()).contains("1009", "⋮ 2,990 more").doesNotContain("1010");
        assertThat(squares.head(50).toString()).contains("1049").doesNotContain("more;");
        assertThat(squares.head(5_000).rowCount()).isEqualTo(3_000);
        assertThatIllegalArgumentException().isThrownBy(() -> squares.head(-1)).withMessageContaining("-1");
    }

    @Test
    void display_nastyColumnAndLevelNames_areEscaped() {
        String html = Table.of(texts("<img src=x onerror=alert(1)>", "<b>&\"'"))
                .display()
                .get(MimeBundle.HTML)
                .orElseThrow();

        assertThat(html).doesNotContain("<img", "<b>").contains("&lt;img src=x", "&lt;b&gt;&amp;&quot;&#39;");
    }

    @Test
    void summary_givesTheFiguresOfEachKind() {
        String text = FAULTS.summary().toString();

        assertThat(text)
                .containsPattern("vehicleKm +1 +3 +60\\.0 +80\\.5 +86\\.8\\d* +120\\.0")
                .containsPattern("faults +0 +3 +0\\.0 +0\\.5 +1 +3\\.0 +50\\.0% +4")
                .containsPattern("depot +1 +2 +Harbour \\(66\\.7%\\), Quayside \\(33\\.3%\\)")
                .containsPattern("seen +1 +3 +2023-12-31 +2024-01-01 +2024-03-01");
        assertThat(FAULTS.summary().display().get(MimeBundle.HTML).orElseThrow())
                .contains("most common");
    }

    @Test
    void summary_noRowsOrAllMissing_hasNoFigures() {
        assertThat(Table.of(numbers("n"), texts("t"), dates("d")).summary().toString())
                .contains("0 rows");
        assertThat(Table.of(numbers("n", Double.NaN)).summary().toString()).containsPattern("n +1 +0 +– +– +– +–");
    }
}
