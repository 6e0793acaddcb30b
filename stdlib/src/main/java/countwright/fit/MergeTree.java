package countwright.fit;

import java.util.ArrayDeque;
import java.util.Deque;
import java.util.function.Supplier;

/**
 * Merges the accumulators of consecutive segments in a tree whose shape depends on their number only: neighbours first,
 * then neighbouring pairs. At most {@code log2} of the number of segments are alive at a time.
 *
 * @param <A> what is gathered
 */
public final class MergeTree<A extends Accumulator<A>> {

    private record Node<A>(A gathered, int height) {}

    private final Deque<Node<A>> open = new ArrayDeque<>();

    /** Takes in the next segment. */
    public void push(A segment) {
        Node<A> node = new Node<>(segment, 0);
        while (!open.isEmpty() && open.getLast().height() == node.height()) {
            Node<A> earlier = open.removeLast();
            earlier.gathered().merge(node.gathered());
            node = new Node<>(earlier.gathered(), node.height() + 1);
        }
        open.addLast(node);
    }

    /** Returns everything merged, or a fresh accumulator if there was no segment. */
    public A result(Supplier<A> fresh) {
        if (open.isEmpty()) {
            return fresh.get();
        }
        A later = open.removeLast().gathered();
        while (!open.isEmpty()) {
            A earlier = open.removeLast().gathered();
            earlier.merge(later);
            later = earlier;
        }
        return later;
    }
}
