package countwright.fit;

import countwright.family.Family;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Optional;

/**
 * Maximum likelihood by Fisher scoring, which is Newton's method for a log-link Poisson model.
 *
 * <p>How it goes: a survey of the columns sets aside those that no row or only rows with zero counts enter; the baseline
 * alone, which has a closed form, is the start; each step solves the normal equations, and is halved while it lowers the
 * log-likelihood. It has converged when the Newton decrement {@code g' I^-1 g}, the squared length of the step measured in
 * standard errors, is below 1e-16; that step is still taken, after which the error is of the order of the square. A decrement
 * that vanishes while some row's predictor still moves means that the likelihood keeps rising along a direction in which the
 * means of rows without events go to 0: there is no finite maximum.
 *
 * <p>Source: P. McCullagh and J. A. Nelder, <em>Generalized Linear Models</em>, 2nd ed., 1989, section 2.5.
 */
public final class MaximumLikelihood {

    private static final int MAX_STEPS = 100;
    private static final int MAX_HALVINGS = 40;
    private static final double DECREMENT = 1e-16;

    /** Below this a decrement that no longer falls quadratically is either noise or a direction without end. */
    private static final double NOISE = 1e-9;

    private static final double SETTLED_SHIFT = 1e-3;

    private final RowSource source;
    private final Family family;
    private final Survey survey;
    private final int columnCount;
    private final List<ColumnState> states = new ArrayList<>();
    private final boolean[] unbounded;

    private MaximumLikelihood(RowSource source, Family family, Survey survey) {
        this.source = source;
        this.family = family;
        this.survey = survey;
        this.columnCount = source.columnCount();
        this.unbounded = new boolean[columnCount];
        for (int column = 0; column < columnCount; column++) {
            states.add(survey.state(column));
            unbounded[column] = survey.state(column) == ColumnState.UNBOUNDED;
        }
    }

    /**
     * Returns the maximum likelihood estimate.
     *
     * @param source the rows; at least one has a count above 0
     * @param family the distribution of the counts
     * @throws IllegalArgumentException if there is no row, or every count is 0
     */
    public static Estimate fit(RowSource source, Family family) {
        Survey survey = source.fold(() -> new Survey(source.columnCount()));
        if (!(survey.totalCount() > 0)) {
            throw new IllegalArgumentException("a fit needs at least one event, but the counts of all "
                    + source.rowCount() + " rows add up to " + survey.totalCount() + ".");
        }
        return new MaximumLikelihood(source, family, survey).climb();
    }

    private Estimate climb() {
        double[] start = new double[columnCount];
        start[0] = Math.log(survey.totalCount() / survey.totalExposure());
        double nullDeviance = source.fold(LikelihoodPass.at(start, new boolean[columnCount], family))
                .deviance();
        LikelihoodPass first = source.fold(LikelihoodPass.at(start, unbounded, family));
        List<Integer> kept = settleRank(first);
        Point point = new Point(start, first, Cholesky.of(first.information(), kept));
        double decrement = Double.POSITIVE_INFINITY;
        for (int step = 1; step <= MAX_STEPS; step++) {
            double[] direction = point.direction();
            double previous = decrement;
            decrement = point.decrement(direction);
            boolean last = decrement <= DECREMENT || (decrement <= NOISE && decrement > previous / 10);
            Optional<Point> next = last ? Optional.of(moved(point, direction, 1)) : uphill(point, direction);
            if (next.isEmpty()) {
                return result(point, new Convergence.NotConverged(step, decrement), nullDeviance);
            }
            if (next.get().factor.rank() < kept.size()) {
                return result(point, new Convergence.NoFiniteMaximum(step, moving(direction)), nullDeviance);
            }
            if (last) {
                return result(next.get(), verdict(step, decrement, direction), nullDeviance);
            }
            point = next.get();
        }
        return result(point, new Convergence.NotConverged(MAX_STEPS, decrement), nullDeviance);
    }

    /** Marks the columns that earlier ones determine, and returns those that remain to be estimated. */
    private List<Integer> settleRank(LikelihoodPass first) {
        List<Integer> candidates = new ArrayList<>();
        for (int column = 0; column < columnCount; column++) {
            if (states.get(column) == ColumnState.ESTIMATED) {
                candidates.add(column);
            }
        }
        List<Integer> kept = Cholesky.of(first.information(), candidates).kept();
        for (int column : candidates) {
            if (!kept.contains(column)) {
                boolean onlyVanishingRows = first.information().value(Cholesky.packed(column, column)) == 0;
                states.set(column, onlyVanishingRows ? ColumnState.EMPTY : ColumnState.ALIASED);
            }
        }
        return kept;
    }

    private Optional<Point> uphill(Point point, double[] direction) {
        double fraction = 1;
        for (int halving = 0; halving <= MAX_HALVINGS; halving++) {
            Point next = moved(point, direction, fraction);
            double before = point.pass.logLikelihood();
            // The comparison is false for NaN, which a mean beyond the largest double gives.
            if (next.pass.logLikelihood() >= before - 1e-12 * Math.abs(before)) {
                return Optional.of(next);
            }
            fraction /= 2;
        }
        return Optional.empty();
    }

    private Point moved(Point point, double[] direction, double fraction) {
        double[] coefficients = new double[columnCount];
        for (int column = 0; column < columnCount; column++) {
            coefficients[column] = point.coefficients[column] + fraction * direction[column];
        }
        LikelihoodPass pass = source.fold(LikelihoodPass.at(coefficients, unbounded, family));
        return new Point(coefficients, pass, Cholesky.of(pass.information(), point.factor.kept()));
    }

    private Convergence verdict(int steps, double decrement, double[] lastStep) {
        double shift = source.fold(() -> new LargestShift(lastStep, unbounded)).value();
        return shift <= SETTLED_SHIFT
                ? new Convergence.Converged(steps, decrement)
                : new Convergence.NoFiniteMaximum(steps, moving(lastStep));
    }

    private List<Integer> moving(double[] step) {
        List<Integer> columns = new ArrayList<>();
        for (int column = 0; column < columnCount; column++) {
            if (Math.abs(step[column]) * survey.largest(column) > SETTLED_SHIFT) {
                columns.add(column);
            }
        }
        return columns;
    }

    private Estimate result(Point point, Convergence convergence, double nullDeviance) {
        LikelihoodPass pass = point.pass;
        TwofoldTriangle covariance = point.factor.inverse(columnCount);
        int[] estimated =
                point.factor.kept().stream().mapToInt(Integer::intValue).toArray();
        double pearsonSpread = source.fold(() ->
                        new PearsonSpread(family, new LinearPredictor(point.coefficients, unbounded), columnCount))
                .value(covariance, estimated);
        FitSummary summary = new FitSummary(
                source.rowCount(),
                pass.informativeRows(),
                point.factor.rank(),
                survey.totalCount(),
                pass.logLikelihood(),
                pass.deviance(),
                nullDeviance,
                pass.pearsonChiSquare(),
                pearsonSpread);
        double[] ranges = new double[columnCount];
        Arrays.setAll(ranges, survey::range);
        return new Estimate(point.coefficients, states, ranges, covariance, convergence, summary);
    }

    /** A place on the likelihood surface with what was gathered there. */
    private static final class Point {

        private final double[] coefficients;
        private final LikelihoodPass pass;
        private final Cholesky factor;

        Point(double[] coefficients, LikelihoodPass pass, Cholesky factor) {
            this.coefficients = coefficients;
            this.pass = pass;
            this.factor = factor;
        }

        double[] direction() {
            return factor.solve(pass.score(), coefficients.length);
        }

        double decrement(double[] direction) {
            double sum = 0;
            for (int column = 0; column < direction.length; column++) {
                sum += direction[column] * pass.score().value(column);
            }
            return sum;
        }
    }
}
