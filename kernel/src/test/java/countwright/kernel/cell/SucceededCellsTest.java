package countwright.kernel.cell;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import org.junit.jupiter.api.Test;

class SucceededCellsTest {

    private final SucceededCells cells = new SucceededCells();

    private static CellText cell(int number, String code) {
        return new CellText("cell [" + number + "]", code);
    }

    /** Takes out all that is to be run again, as a restore that succeeds does. */
    private List<String> restoreAll() {
        List<String> restored = new ArrayList<>();
        for (Optional<CellText> next = cells.firstLost(); next.isPresent(); next = cells.firstLost()) {
            restored.add(next.get().name());
            cells.firstLostRestored();
        }
        return restored;
    }

    @Test
    void livingCells_areNotLost() {
        cells.add(cell(1, "a"));
        assertThat(cells.lostCount()).isZero();
    }

    @Test
    void twoLosses_keepTheOrderInWhichCellsFirstRan() {
        cells.add(cell(1, "a"));
        cells.add(cell(2, "b"));
        cells.sessionLost();
        cells.add(cell(3, "c"));
        cells.sessionLost();
        assertThat(restoreAll()).containsExactly("cell [1]", "cell [2]", "cell [3]");
    }

    @Test
    void sameCodeRunByHand_takesThePlaceOfTheLostCell() {
        cells.add(cell(1, "a"));
        cells.add(cell(2, "b"));
        cells.sessionLost();
        cells.add(cell(3, "a"));
        assertThat(restoreAll()).containsExactly("cell [2]");
        cells.sessionLost();
        assertThat(restoreAll()).containsExactly("cell [3]", "cell [2]");
    }

    @Test
    void manyLargeCells_forgetTheOldestAndCountThem() {
        String large = "x".repeat(1 << 20);
        for (int i = 1; i <= 20; i++) {
            cells.add(cell(i, large + i));
        }
        cells.sessionLost();
        int kept = cells.lostCount();
        assertThat(kept).isBetween(5, 10);
        assertThat(cells.forgottenCount()).isEqualTo(20 - kept);
        assertThat(restoreAll()).last().isEqualTo("cell [20]");
    }
}
