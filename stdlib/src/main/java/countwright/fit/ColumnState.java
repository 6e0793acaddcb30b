package countwright.fit;

/** What became of a column of the design in a fit. */
public enum ColumnState {
    /** It has an estimate. */
    ESTIMATED,
    /** No row has an entry in it, or only rows whose mean is already determined to be 0. */
    EMPTY,
    /** Earlier columns determine it; it was left out. */
    ALIASED,
    /** Every count in its rows is 0: the likelihood rises for ever as the mean of these rows goes to 0. */
    UNBOUNDED
}
