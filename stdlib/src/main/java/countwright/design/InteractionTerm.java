package countwright.design;

import java.util.List;

/**
 * What two effects do together beyond the sum of their own. It adds only the product columns; give the two main terms
 * beside it (see {@link Terms#interaction}).
 *
 * @param first one of the two terms
 * @param second the other
 */
public record InteractionTerm(MainTerm first, MainTerm second) implements Term {

    /** Checks that the two terms read different columns. */
    public InteractionTerm {
        if (first instanceof LevelsTerm && first.column().equals(second.column()) && second instanceof LevelsTerm) {
            throw new IllegalArgumentException("an interaction of levels(\"" + first.column()
                    + "\") with itself says nothing new; name two different columns.");
        }
    }

    @Override
    public List<String> columns() {
        return first.column().equals(second.column())
                ? List.of(first.column())
                : List.of(first.column(), second.column());
    }

    @Override
    public String label() {
        return first.equals(second) ? first.label() + "²" : first.label() + " × " + second.label();
    }
}
