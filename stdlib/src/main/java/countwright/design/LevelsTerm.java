package countwright.design;

import java.util.Optional;

/**
 * A factor: each level but the reference has a coefficient, the difference of its log rate from that of the reference.
 *
 * @param column name of the column: text, numbers, dates or date-times
 * @param chosenReference the reference level the user chose; without one it is the first level in ascending order
 */
public record LevelsTerm(String column, Optional<String> chosenReference) implements MainTerm {

    /** Returns this term with the level all others are compared with, written as the table shows it. */
    public LevelsTerm reference(String level) {
        return new LevelsTerm(column, Optional.of(level));
    }

    /** Returns this term with the level all others are compared with, for a factor whose levels are numbers. */
    public LevelsTerm reference(double level) {
        return reference(Factor.levelText(level));
    }
}
