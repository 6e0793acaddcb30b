package countwright.show;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.assertThatIllegalStateException;

import java.util.List;
import org.junit.jupiter.api.Test;

class GridTest {

    private static final Grid TWO = Grid.titled("Faults").textColumn("depot").numberColumn("faults", "a year");

    @Test
    void toString_alignsTextLeftAndNumbersRight() {
        Grid grid = TWO.row("Harbour", "7").row("Quay", "1,234").note("Invented.");

        assertThat(grid).hasToString("""
                Faults
                ────────────────
                depot     faults
                          a year
                ────────────────
                Harbour        7
                Quay       1,234
                ────────────────
                Invented.""");
    }

    @Test
    void toString_accentsAndWideCharacters_alignByTheCellsTheyTake() {
        String text =
                TWO.row("日本", "1").row("Größe", "2").row("e\u0301te\u0301", "3").toString();

        assertThat(text.lines().filter(line -> line.matches(".*[123]")).map(TextWidth::of))
                .containsOnly(5 + 3 + 6)
                .hasSize(3);
    }

    @Test
    void toString_longGrid_leavesTheMiddleOutAndSaysHowMuch() {
        Grid grid = TWO;
        for (int i = 1; i <= 1_240; i++) {
            grid = grid.row("depot " + i, "0");
        }
        String text = grid.showing(2, 1).toString();

        assertThat(text)
                .contains("depot 2 ", "⋮  1,237 rows not shown", "depot 1240")
                .doesNotContain("depot 3 ");
        assertThat(grid.showingAll().toString()).contains("depot 700 ");
    }

    @Test
    void toString_cellWithLineBreak_staysOnOneLine() {
        assertThat(TWO.row("a\nb\tc\u0007", "1").toString()).contains("a↵b⇥c");
    }

    @Test
    void html_nastyNames_areEscapedEverywhere() {
        String nasty = "<script>alert('x')</script>&\"";
        String html = Grid.titled(nasty)
                .textColumn(nasty, nasty)
                .row(nasty)
                .note(nasty)
                .display()
                .get(MimeBundle.HTML)
                .orElseThrow();

        assertThat(html)
                .doesNotContain("<script")
                .doesNotContain("alert('")
                .contains("&lt;script&gt;alert(&#39;x&#39;)&lt;/script&gt;&amp;&quot;");
        assertThat(html.split("&lt;script&gt;", -1)).hasSize(6);
    }

    @Test
    void html_usesNoStyleElementAndNoFixedColour() {
        String html = TWO.row("Harbour", "7").display().get(MimeBundle.HTML).orElseThrow();

        assertThat(html)
                .doesNotContain("<style")
                .doesNotContainPattern("color:\\s*(#|black|white)")
                .contains("tabular-nums", "text-align:right", "overflow-x:auto", "scope=\"row\"");
    }

    @Test
    void row_wrongNumberOfCells_saysBothNumbers() {
        assertThatIllegalArgumentException()
                .isThrownBy(() -> TWO.row("Harbour"))
                .withMessage("a row has 1 cells where the grid has 2 columns.");
        assertThatIllegalArgumentException().isThrownBy(() -> TWO.rows(List.of(List.of("a", "b", "c"))));
    }

    @Test
    void textColumn_afterRows_isRefused() {
        assertThatIllegalStateException()
                .isThrownBy(() -> TWO.row("Harbour", "7").textColumn("late"))
                .withMessageContaining("'late'");
    }
}
