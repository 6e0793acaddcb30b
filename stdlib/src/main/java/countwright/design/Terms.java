package countwright.design;

import java.util.Optional;

/** The factories of terms, imported in every session: {@code linear}, {@code levels}, {@code interaction}. */
public final class Terms {

    private Terms() {}

    /** Returns the effect of a column of numbers, linear on the log scale. */
    public static LinearTerm linear(String column) {
        return new LinearTerm(column);
    }

    /**
     * Returns the effect of a factor. Its levels are the distinct values of the column in ascending order; the first is
     * the reference unless {@link LevelsTerm#reference} names another.
     */
    public static LevelsTerm levels(String column) {
        return new LevelsTerm(column, Optional.empty());
    }

    /**
     * Returns the interaction of two effects, and only that: the main terms are not added by themselves. Write
     * {@code on(linear("age"), levels("doorType"), interaction(linear("age"), levels("doorType")))} for slopes and levels
     * that both differ. Without {@code levels("doorType")} the door types share one baseline and differ in slope only.
     *
     * <p>Linear × linear gives one coefficient, and for a column with itself that of its square; linear × levels one difference of slopes for each level but the reference;
     * levels × levels one for each pair of levels in which neither is the reference. A factor that stands in a main term
     * with a chosen reference has the same reference in its interactions, unless they choose their own.
     */
    public static InteractionTerm interaction(MainTerm first, MainTerm second) {
        return new InteractionTerm(first, second);
    }
}
