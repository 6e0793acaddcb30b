package countwright.model;

import countwright.design.Design;
import countwright.design.Factor;
import countwright.design.InteractionTerm;
import countwright.design.LevelsTerm;
import countwright.design.Term;
import countwright.fit.Estimate;
import countwright.fit.MaximumLikelihood;
import countwright.fit.RowSource;
import countwright.table.NumberColumn;
import countwright.table.Table;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.function.IntToDoubleFunction;

/** From a specification and a table to a fitted model: choose and check rows, bind the design, estimate. */
final class Fitting {

    private final CountModel spec;
    private final Table table;
    private final Design design;

    private Fitting(CountModel spec, Table table, Design design) {
        this.spec = spec;
        this.table = table;
        this.design = design;
    }

    static FittedModel fit(CountModel spec, Table given) {
        UsedRows used = UsedRows.of(spec, given);
        Design design = Design.learn(spec.terms(), used.table());
        Fitting fitting = new Fitting(spec, used.table(), design);
        fitting.checkEvents();
        fitting.checkSize();
        RowSource rows = rows(spec, design, used.table());
        Estimate estimate = MaximumLikelihood.fit(rows, spec.family());
        return new FittedModel(
                new Fit(spec, used.table(), design, rows, estimate, used.leftOut()), Interval.USUAL_LEVEL);
    }

    /** Returns the rows of a table as a source, with the counts and offsets of a model. */
    private static RowSource rows(CountModel spec, Design design, Table table) {
        NumberColumn counts = table.numbers(spec.response());
        return design.rows(table, counts::value, offset(spec, table));
    }

    /** Returns the offset of each row: the log of its exposure, plus the offset column; 0 for what there is not. */
    static IntToDoubleFunction offset(CountModel spec, Table table) {
        Optional<NumberColumn> exposures = spec.exposure().filter(table::has).map(table::numbers);
        Optional<NumberColumn> offsets = spec.offset().map(table::numbers);
        IntToDoubleFunction ofExposure = exposures
                .<IntToDoubleFunction>map(column -> row -> Math.log(column.value(row)))
                .orElse(row -> 0);
        return offsets.<IntToDoubleFunction>map(column -> row -> ofExposure.applyAsDouble(row) + column.value(row))
                .orElse(ofExposure);
    }

    private void checkSize() {
        if (table.rowCount() < design.columnCount()) {
            throw new IllegalArgumentException(
                    "the model has " + design.columnCount() + " coefficients, but only " + table.rowCount()
                            + " rows to estimate them from. Use fewer terms, merge levels, or use more rows.");
        }
    }

    /** Refuses what would make every ratio infinite: no event at all, or none at a reference level. */
    private void checkEvents() {
        NumberColumn counts = table.numbers(spec.response());
        double total = 0;
        for (int row = 0; row < table.rowCount(); row++) {
            total += counts.value(row);
        }
        if (total == 0) {
            throw new IllegalArgumentException(
                    "every count in '" + spec.response() + "' is 0 in the " + table.rowCount()
                            + " rows used, so no rate ratio can be estimated; an exact upper limit for the rate is what such data"
                            + " can give.");
        }
        for (Term term : spec.terms()) {
            if (term instanceof LevelsTerm levels) {
                design.factor(levels.column()).ifPresent(factor -> checkReference(factor, counts));
            }
        }
    }

    private void checkReference(Factor factor, NumberColumn counts) {
        if (hasInteraction(factor.column())) {
            return;
        }
        double[] events = new double[factor.levels().size()];
        int[] codes = factor.codes(table);
        for (int row = 0; row < codes.length; row++) {
            events[codes[row]] += counts.value(row);
        }
        if (events[factor.referenceIndex()] > 0) {
            return;
        }
        List<String> others = new ArrayList<>();
        for (int level = 0; level < events.length; level++) {
            if (events[level] > 0) {
                others.add(factor.levels().get(level));
            }
        }
        throw new IllegalArgumentException(
                "the reference level '" + factor.reference() + "' of levels(\"" + factor.column()
                        + "\") has no events, so every rate ratio against it would be infinite. Choose one that has, such as levels(\""
                        + factor.column() + "\").reference(\"" + others.get(0) + "\").");
    }

    private boolean hasInteraction(String column) {
        return spec.terms().stream()
                .anyMatch(term ->
                        term instanceof InteractionTerm && term.columns().contains(column));
    }
}
