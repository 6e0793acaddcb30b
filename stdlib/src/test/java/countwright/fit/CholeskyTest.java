package countwright.fit;

import static countwright.reference.Digits.assertDigits;
import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;

class CholeskyTest {

    @Test
    void solve_hilbertMatrixOfSize8_keeps14Digits() {
        // Condition number 1.5e10; in doubles six digits would be left. The entries are doubles near 1/(i+j+1), so they
        // are
        // scaled by the least common multiple of 1..15, which makes them whole.
        int size = 8;
        double scale = 360_360;
        TwofoldSums triangle = new TwofoldSums(size * (size + 1) / 2);
        TwofoldSums right = new TwofoldSums(size);
        for (int i = 0; i < size; i++) {
            for (int j = 0; j < size; j++) {
                right.add(i, scale / (i + j + 1));
            }
            for (int j = 0; j <= i; j++) {
                triangle.add(Cholesky.packed(i, j), scale / (i + j + 1));
            }
        }
        double[] solution = Cholesky.of(triangle, range(size)).solve(right, size);
        for (double x : solution) {
            assertDigits(1, x, 14);
        }
    }

    @Test
    void inverse_hilbertMatrixOfSize4_isWhole() {
        int size = 4;
        double scale = 420;
        TwofoldSums triangle = new TwofoldSums(size * (size + 1) / 2);
        for (int i = 0; i < size; i++) {
            for (int j = 0; j <= i; j++) {
                triangle.add(Cholesky.packed(i, j), scale / (i + j + 1));
            }
        }
        TwofoldTriangle inverse = Cholesky.of(triangle, range(size)).inverse(size);
        double[][] expected = {
            {16, -120, 240, -140}, {-120, 1200, -2700, 1680}, {240, -2700, 6480, -4200}, {-140, 1680, -4200, 2800}
        };
        for (int i = 0; i < size; i++) {
            for (int j = 0; j < size; j++) {
                assertDigits(expected[i][j] / scale, inverse.value(i, j), 15);
            }
        }
    }

    @Test
    void of_dependentColumn_passesOverTheLastOfThem() {
        // Columns a, b, a + b, c of a design with orthogonal a, b, c.
        double[][] gram = {{1}, {0, 4}, {1, 4, 5}, {0, 0, 0, 9}};
        TwofoldSums triangle = new TwofoldSums(10);
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j <= i; j++) {
                triangle.add(Cholesky.packed(i, j), gram[i][j]);
            }
        }
        assertThat(Cholesky.of(triangle, range(4)).kept()).containsExactly(0, 1, 3);
    }

    @Test
    void of_columnWithoutEntries_passesOverIt() {
        TwofoldSums triangle = new TwofoldSums(3);
        triangle.add(0, 2);
        assertThat(Cholesky.of(triangle, range(2)).kept()).containsExactly(0);
    }

    private static List<Integer> range(int size) {
        return IntStream.range(0, size).boxed().toList();
    }
}
