package countwright.model;

import countwright.family.Family;

/**
 * The kinds of residual of a fitted count model. With count {@code y}, fitted mean {@code mu}, unit deviance {@code d}
 * and leverage {@code h}; all are 0 where count and mean are both 0. Source: McCullagh and Nelder 1989, sections 2.4 and
 * 12.4.
 */
public enum Residual {
    /** {@code sign(y - mu) sqrt(d)}: its squares sum to the deviance. */
    DEVIANCE,
    /** {@code (y - mu) / sqrt(V(mu))}: its squares sum to the Pearson chi-square. */
    PEARSON,
    /** The deviance residual divided by {@code sqrt(1 - h)}; NaN where the leverage is 1. */
    STANDARDISED_DEVIANCE,
    /** The Pearson residual divided by {@code sqrt(1 - h)}; NaN where the leverage is 1. */
    STANDARDISED_PEARSON;

    boolean isStandardised() {
        return this == STANDARDISED_DEVIANCE || this == STANDARDISED_PEARSON;
    }

    /** Returns the residual before it is standardised. */
    double raw(Family family, double y, double mu) {
        if (mu == 0 && y == 0) {
            return 0;
        }
        return this == DEVIANCE || this == STANDARDISED_DEVIANCE
                ? Math.copySign(Math.sqrt(Math.max(0, family.unitDeviance(y, mu))), y - mu)
                : (y - mu) / Math.sqrt(family.variance(mu));
    }
}
