package countwright.fit;

/**
 * Something that is gathered over rows, block by block.
 *
 * @param <A> the type itself
 */
public interface Accumulator<A extends Accumulator<A>> {

    /** Takes in a block; keeps nothing of it. */
    void add(Block block);

    /** Takes in what was gathered over the rows that follow; the other is not used again. */
    void merge(A later);
}
