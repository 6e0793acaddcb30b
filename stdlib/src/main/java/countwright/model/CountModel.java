package countwright.model;

import countwright.design.Term;
import countwright.family.Family;
import countwright.table.Table;
import java.util.List;
import java.util.Optional;

/**
 * What is to be modelled: which counts, out of how much exposure, depending on what. Immutable; each method returns a new
 * specification.
 *
 * <pre>{@code
 * var model = CountModel.of("faults")
 *     .exposure("vehicleKm")
 *     .on(linear("age"), levels("depot").reference("Harbour"))
 *     .fit(faults);
 * }</pre>
 */
public final class CountModel {

    private final String response;
    private final Optional<String> exposure;
    private final Optional<String> offset;
    private final List<Term> terms;
    private final Family family;

    private CountModel(
            String response, Optional<String> exposure, Optional<String> offset, List<Term> terms, Family family) {
        this.response = response;
        this.exposure = exposure;
        this.offset = offset;
        this.terms = List.copyOf(terms);
        this.family = family;
    }

    /** Returns a model of the counts in a column, as yet with a baseline rate only. */
    public static CountModel of(String response) {
        return new CountModel(response, Optional.empty(), Optional.empty(), List.of(), Family.poisson());
    }

    /** Returns this model with the column of exposures: the amount over which each count was collected, above 0. */
    public CountModel exposure(String column) {
        return new CountModel(response, Optional.of(column), offset, terms, family);
    }

    /** Returns this model with a column that is added to the log of the mean as it is, without a coefficient. */
    public CountModel offset(String column) {
        return new CountModel(response, exposure, Optional.of(column), terms, family);
    }

    /** Returns this model with the terms the rate depends on, in place of any given before. */
    public CountModel on(Term... newTerms) {
        return new CountModel(response, exposure, offset, List.of(newTerms), family);
    }

    /** Returns this model with another distribution of the counts. */
    public CountModel with(Family newFamily) {
        return new CountModel(response, exposure, offset, terms, newFamily);
    }

    /** Returns the name of the column of counts. */
    public String response() {
        return response;
    }

    /** Returns the name of the column of exposures, if there is one. */
    public Optional<String> exposure() {
        return exposure;
    }

    /** Returns the name of the offset column on the log scale, if there is one. */
    public Optional<String> offset() {
        return offset;
    }

    /** Returns the terms, in the order given. */
    public List<Term> terms() {
        return terms;
    }

    /** Returns the distribution of the counts. */
    public Family family() {
        return family;
    }

    /**
     * Fits the model to a table by maximum likelihood. Rows in which a value that the model reads is missing are left out,
     * and the result says so.
     *
     * @throws IllegalArgumentException if a column is unknown or of the wrong kind; a count is negative or not whole; an
     *     exposure is not above 0 and finite; a term has nothing to vary with; a reference level is unknown or has no
     *     events; or there are fewer rows than coefficients. The message names the row, the value and the remedy.
     */
    public FittedModel fit(Table table) {
        return Fitting.fit(this, table);
    }

    @Override
    public String toString() {
        String per = exposure.map(name -> " per " + name).orElse("");
        String plus = offset.map(name -> ", offset " + name).orElse("");
        List<String> labels = terms.stream().map(Term::label).toList();
        String on = labels.isEmpty() ? "a baseline only" : String.join(", ", labels);
        return response + per + plus + ", " + family.name() + ", on " + on;
    }
}
