package countwright.kernel.desk;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;

class TerminalTextTest {

    @Test
    void plain_colourAndTitleSequences_areRemoved() {
        assertThat(TerminalText.plain("\u001B[1;38;5;9mred\u001B[0m \u001B]0;title\u0007end\u001B[2K"))
                .isEqualTo("red end");
    }

    @Test
    void plain_carriageReturn_overwritesFromTheStart() {
        assertThat(TerminalText.plain("\n50 %\r100 %\nabc\rX\nlast")).isEqualTo("\n100 %\nXbc\nlast");
    }

    @Test
    void plain_backspace_overwritesOne() {
        assertThat(TerminalText.plain("ab\b\bcd\b!")).isEqualTo("c!");
    }

    @Test
    void plain_windowsLineEnds_areLineEnds() {
        assertThat(TerminalText.plain("a\r\n\tb\u0000\r\n")).isEqualTo("a\n\tb\n");
    }
}
