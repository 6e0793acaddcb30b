package countwright.chart;

import countwright.design.InteractionTerm;
import countwright.design.LinearTerm;
import countwright.design.MainTerm;
import countwright.design.Term;
import countwright.fit.Convergence;
import countwright.model.FittedModel;
import countwright.model.Prediction;
import countwright.model.RateRatio;
import countwright.model.Residual;
import countwright.show.NearNames;
import countwright.show.Numbers;
import countwright.table.Table;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.function.Function;
import java.util.function.Supplier;

/**
 * What charts read of a fitted model, each part when it is wanted.
 *
 * @param response the column of counts
 * @param exposure the column of exposures, empty if there is none
 * @param offset the offset column on the log scale, if there is one
 * @param terms the terms of the model
 * @param table the rows used
 * @param counts one for each row used
 * @param exposures one for each row used
 * @param means fitted mean counts, one for each row used
 * @param coefficients how many coefficients were estimated
 * @param warning a sentence if the estimates are not the maximum of the likelihood, else empty
 * @param level the confidence level of intervals
 * @param residuals the residuals of a kind, one for each row used
 * @param predict predictions for a table of scenarios
 * @param rateRatios the rate ratios, in the order of the terms
 */
record Fit(
        String response,
        String exposure,
        Optional<String> offset,
        List<Term> terms,
        Table table,
        Supplier<double[]> counts,
        Supplier<double[]> exposures,
        Supplier<double[]> means,
        int coefficients,
        String warning,
        double level,
        Function<Residual, double[]> residuals,
        Function<Table, List<Prediction>> predict,
        List<RateRatio> rateRatios) {

    static Fit of(FittedModel model) {
        return new Fit(
                model.spec().response(),
                model.spec().exposure().orElse(""),
                model.spec().offset(),
                model.terms(),
                model.table(),
                model::counts,
                model::exposures,
                model::fittedMeans,
                model.rowCount() - model.residualDegreesOfFreedom(),
                model.convergence() instanceof Convergence.Converged
                        ? ""
                        : " The fit did not end at a finite maximum: see the notices of the model, and do not use this.",
                model.level(),
                model::residuals,
                scenarios -> model.predict(scenarios).at(model.level()).rows(),
                model.rateRatios());
    }

    /** Returns the names of the columns the terms read, in their order. */
    List<String> covariates() {
        List<String> names = new ArrayList<>();
        for (Term term : terms) {
            for (String column : term.columns()) {
                if (!names.contains(column)) {
                    names.add(column);
                }
            }
        }
        return names;
    }

    /** Returns whether some term takes a column as a number rather than as levels. */
    boolean isNumberIn(String column) {
        return terms.stream().anyMatch(term -> readsAsNumber(term, column));
    }

    /** Returns the level as a reader writes it, such as "95%". */
    String levelText() {
        return Numbers.compact(level * 100) + "%";
    }

    /**
     * Checks that some term reads a column.
     *
     * @throws IllegalArgumentException if not, naming the covariates there are and those whose name is close
     */
    void checkCovariate(String column) {
        List<String> covariates = covariates();
        if (covariates.contains(column)) {
            return;
        }
        if (covariates.isEmpty()) {
            throw new IllegalArgumentException("the model has no covariate '" + column
                    + "'; it has a baseline rate only. Add a term with on(...).");
        }
        String question = NearNames.question(column, covariates);
        throw new IllegalArgumentException("the model has no covariate '" + column + "'. "
                + (question.isEmpty() ? "" : question + " ") + "Its covariates are " + NearNames.list(covariates) + "."
                + (table.has(column)
                        ? " '" + column + "' is a column of the table, but in no term of the model."
                        : ""));
    }

    private static boolean readsAsNumber(Term term, String column) {
        if (term instanceof InteractionTerm interaction) {
            return readsAsNumber(interaction.first(), column) || readsAsNumber(interaction.second(), column);
        }
        return term instanceof LinearTerm && ((MainTerm) term).column().equals(column);
    }
}
