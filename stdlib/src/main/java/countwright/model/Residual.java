package countwright.model;

/**
 * The kinds of residual of a fitted count model. With count {@code y}, fitted mean {@code mu}, unit deviance {@code d}
 * and leverage {@code h}; source: McCullagh and Nelder 1989, sections 2.4 and 12.4.
 */
public enum Residual {
    /** {@code sign(y - mu) sqrt(d)}: its squares sum to the deviance. */
    DEVIANCE,
    /** {@code (y - mu) / sqrt(V(mu))}: its squares sum to the Pearson chi-square. */
    PEARSON,
    /** The deviance residual divided by {@code sqrt(1 - h)}, NaN where the leverage is 1. */
    STANDARDISED_DEVIANCE,
    /** The Pearson residual divided by {@code sqrt(1 - h)}, NaN where the leverage is 1. */
    STANDARDISED_PEARSON
}
