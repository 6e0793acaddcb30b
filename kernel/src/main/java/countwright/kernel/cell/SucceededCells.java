package countwright.kernel.cell;

import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.Deque;
import java.util.Iterator;
import java.util.List;
import java.util.Optional;

/**
 * The cells that have succeeded, for running them again after their worker was lost. Bounded: when their text grows
 * beyond {@link #MOST_CHARACTERS}, the oldest are forgotten.
 */
final class SucceededCells {

    private static final long MOST_CHARACTERS = 8L << 20;

    /** What a cell counts for beside its text. */
    private static final long OVERHEAD = 64;

    private record Kept(long order, CellText cell) {

        long size() {
            return cell.code().length() + OVERHEAD;
        }
    }

    private final Deque<Kept> alive = new ArrayDeque<>();
    private final Deque<Kept> lost = new ArrayDeque<>();
    private long nextOrder;
    private long size;
    private int forgotten;

    /** Takes down a cell that has succeeded; a lost one with the same code has thereby been run again, in its place. */
    synchronized void add(CellText cell) {
        long order = nextOrder++;
        for (Iterator<Kept> each = lost.iterator(); each.hasNext(); ) {
            Kept old = each.next();
            if (old.cell().code().equals(cell.code())) {
                each.remove();
                size -= old.size();
                order = old.order();
                break;
            }
        }
        Kept kept = new Kept(order, cell);
        alive.addLast(kept);
        size += kept.size();
        while (size > MOST_CHARACTERS) {
            Kept oldest = lost.isEmpty() ? alive.removeFirst() : lost.removeFirst();
            size -= oldest.size();
            forgotten++;
        }
    }

    /** Says that what the cells declared is gone. */
    synchronized void sessionLost() {
        List<Kept> all = new ArrayList<>(lost);
        all.addAll(alive);
        // Some of the living may have been restored themselves, before others that are still to be.
        all.sort(Comparator.comparingLong(Kept::order));
        alive.clear();
        lost.clear();
        lost.addAll(all);
    }

    /** Returns how many cells can be run again. */
    synchronized int lostCount() {
        return lost.size();
    }

    /** Returns how many cells were too far back to be kept. */
    synchronized int forgottenCount() {
        return forgotten;
    }

    /** Returns the first cell to run again. */
    synchronized Optional<CellText> firstLost() {
        return Optional.ofNullable(lost.peekFirst()).map(Kept::cell);
    }

    /** Says that the first lost cell has succeeded again. */
    synchronized void firstLostRestored() {
        alive.addLast(lost.removeFirst());
    }
}
