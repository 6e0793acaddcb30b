package countwright.fit;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;

class MergeTreeTest {

    @Test
    void result_severalSegments_mergesNeighboursInOrder() {
        assertThat(shape(1)).isEqualTo("1");
        assertThat(shape(4)).isEqualTo("((1 2) (3 4))");
        assertThat(shape(7)).isEqualTo("(((1 2) (3 4)) ((5 6) 7))");
    }

    @Test
    void result_noSegment_isFresh() {
        assertThat(new MergeTree<Shape>().result(() -> new Shape("fresh")).text).isEqualTo("fresh");
    }

    private static String shape(int segments) {
        MergeTree<Shape> tree = new MergeTree<>();
        for (int i = 1; i <= segments; i++) {
            tree.push(new Shape(Integer.toString(i)));
        }
        return tree.result(() -> new Shape("fresh")).text;
    }

    private static final class Shape implements Accumulator<Shape> {

        private String text;

        Shape(String text) {
            this.text = text;
        }

        @Override
        public void add(Block block) {
            throw new AssertionError("a merge reads no rows");
        }

        @Override
        public void merge(Shape later) {
            text = "(" + text + " " + later.text + ")";
        }
    }
}
