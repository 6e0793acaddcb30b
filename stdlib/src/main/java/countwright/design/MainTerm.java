package countwright.design;

import java.util.List;

/** A term that reads one column, and that can take part in an interaction. */
public sealed interface MainTerm extends Term permits LinearTerm, LevelsTerm {

    /** Returns the name of the column. */
    String column();

    @Override
    default List<String> columns() {
        return List.of(column());
    }

    @Override
    default String label() {
        return column();
    }
}
