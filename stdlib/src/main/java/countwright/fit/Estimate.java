package countwright.fit;

import java.util.List;

/** The result of a fit, by column of the design. Immutable. */
public final class Estimate {

    private final double[] coefficients;
    private final List<ColumnState> states;
    private final double[] ranges;
    private final TwofoldTriangle covariance;
    private final Convergence convergence;
    private final FitSummary summary;

    Estimate(
            double[] coefficients,
            List<ColumnState> states,
            double[] ranges,
            TwofoldTriangle covariance,
            Convergence convergence,
            FitSummary summary) {
        this.coefficients = coefficients.clone();
        this.states = List.copyOf(states);
        this.ranges = ranges.clone();
        this.covariance = covariance;
        this.convergence = convergence;
        this.summary = summary;
    }

    /** Returns the number of columns. */
    public int columnCount() {
        return coefficients.length;
    }

    /** Returns the coefficient of a column; 0 where it has no estimate. */
    public double coefficient(int column) {
        return coefficients[column];
    }

    /** Returns what became of a column. */
    public ColumnState state(int column) {
        return states.get(column);
    }

    /** Returns how far apart the least and the greatest value in a column of the design are, over all rows; at least 0. */
    public double range(int column) {
        return ranges[column];
    }

    /** Returns the covariance of two coefficients: the inverse of the Fisher information; 0 where one has no estimate. */
    public double covariance(int row, int column) {
        return covariance.value(row, column);
    }

    /** Returns how the iteration ended. */
    public Convergence convergence() {
        return convergence;
    }

    /** Returns the likelihood and the measures of fit. */
    public FitSummary summary() {
        return summary;
    }

    double quadraticForm(int[] columns, double[] entries, int count) {
        return covariance.quadraticForm(columns, entries, count);
    }

    LinearPredictor predictor() {
        boolean[] unbounded = new boolean[coefficients.length];
        for (int column = 0; column < unbounded.length; column++) {
            unbounded[column] = state(column) == ColumnState.UNBOUNDED;
        }
        return new LinearPredictor(coefficients, unbounded);
    }
}
