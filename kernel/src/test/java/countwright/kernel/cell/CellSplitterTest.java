package countwright.kernel.cell;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.cell.CellSplitter.Piece;
import java.util.List;
import jdk.jshell.JShell;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class CellSplitterTest {

    private static final JShell SHELL =
            JShell.builder().executionEngine("local").build();

    @AfterAll
    static void closeShell() {
        SHELL.close();
    }

    private static List<Piece> split(String code) {
        return CellSplitter.split(code, SHELL.sourceCodeAnalysis());
    }

    @Test
    void statements_areCutAndPlaced() {
        String code = "int a = 1; int b = 2;\n// sum\na + b";
        assertThat(split(code))
                .containsExactly(
                        new Piece(0, 10, "int a = 1;", true, false),
                        new Piece(11, 21, "int b = 2;", true, false),
                        new Piece(29, 34, "a + b", true, true));
    }

    @Test
    void commentsAlone_areNoPiece() {
        assertThat(split("/* nothing */ // here\n")).isEmpty();
        assertThat(split("")).isEmpty();
    }

    @Test
    void openBracket_isNotWhole() {
        assertThat(split("int a = 1;\nfor (int i = 0;"))
                .containsExactly(
                        new Piece(0, 10, "int a = 1;", true, false),
                        new Piece(11, 26, "for (int i = 0;", false, false));
    }

    @Test
    void textBlockWithBracesAndQuotes_isOnePiece() {
        assertThat(split("String s = \"\"\"\n  { \"a\"; // }\n  \"\"\";\ns")).hasSize(2);
    }

    @ParameterizedTest
    @ValueSource(strings = {"f();", "f(); // end", "f(); /* a */ ", "\"x\";", "';';", "\"\"\"\n;\"\"\";"})
    void semicolon_isFoundBehindComments(String source) {
        assertThat(CellSplitter.endsWithSemicolon(source)).isTrue();
    }

    @ParameterizedTest
    @ValueSource(strings = {"f()", "f() // ;", "f() /* ; */", "\";\"", "';'", "\"\\\";\"", "\"\"\"\n;\"\"\"", ""})
    void semicolon_inCommentsOrQuotes_doesNotCount(String source) {
        assertThat(CellSplitter.endsWithSemicolon(source)).isFalse();
    }
}
