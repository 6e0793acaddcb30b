package countwright.fit;

import java.util.List;

/** How an iteration ended. */
public sealed interface Convergence {

    /** Returns the number of steps taken. */
    int iterations();

    /**
     * The estimate is the maximum.
     *
     * @param iterations number of steps taken
     * @param decrement the last Newton decrement: the squared length of the last step in standard errors
     */
    record Converged(int iterations, double decrement) implements Convergence {}

    /**
     * The likelihood rises for ever in some direction, although no single column has only zero counts. The estimates of
     * the columns involved are as far as the iteration went and mean nothing. Source: S. Correia, P. Guimarães and T.
     * Zylkin, <em>Verifying the Existence of Maximum Likelihood Estimates for Generalized Linear Models</em>, 2019.
     *
     * @param iterations number of steps taken
     * @param columns the columns whose coefficients still grow
     */
    record NoFiniteMaximum(int iterations, List<Integer> columns) implements Convergence {

        /** Keeps a copy of the list. */
        public NoFiniteMaximum {
            columns = List.copyOf(columns);
        }
    }

    /**
     * The iteration stopped short.
     *
     * @param iterations number of steps taken
     * @param decrement the last Newton decrement
     */
    record NotConverged(int iterations, double decrement) implements Convergence {}
}
