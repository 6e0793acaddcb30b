package countwright.kernel.desk;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class CellLabelTest {

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                "// Look at the rates\\nvar x = 1; | Look at the rates",
                "\\n  var x = 1;\\n// later | var x = 1;",
                "/* Block */\\nx | Block",
                "/**\\n * Doc words\\n */ | Doc words",
                "import java.util.*;\\n// After imports | After imports",
                "import java.util.*; | import java.util.*;",
                "//\\n//\\nfoo() | foo()",
                "// | ''"
            })
    void of_cell_isTheFirstCommentOrLine(String source, String label) {
        assertThat(CellLabel.of(source.replace("\\n", "\n"))).isEqualTo(label);
    }
}
