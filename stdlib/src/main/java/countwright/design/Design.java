package countwright.design;

import countwright.fit.RowSource;
import countwright.table.Table;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.function.IntToDoubleFunction;

/**
 * The terms of a model bound to a table: levels, references and coefficients are settled, so that other tables are coded in
 * just the same way. Immutable.
 *
 * <p>The design of n rows and p columns is never written out. A row has one entry for the baseline and at most one for each
 * term, and they are handed out in blocks.
 */
public final class Design {

    private final List<Effect> effects;
    private final List<String> columnNames;
    private final Map<String, Factor> factors;

    private Design(List<Effect> effects) {
        this.effects = List.copyOf(effects);
        List<String> names = new ArrayList<>();
        Map<String, Factor> found = new LinkedHashMap<>();
        for (Effect effect : effects) {
            for (int index = 0; index < effect.width(); index++) {
                names.add(effect.name(index));
            }
            collect(effect, found);
        }
        this.columnNames = List.copyOf(names);
        this.factors = found;
    }

    /**
     * Returns the design of some terms as learned from a table without missing values in their columns.
     *
     * @throws IllegalArgumentException if a column is unknown, of the wrong kind or constant, or a reference level unknown
     */
    public static Design learn(List<? extends Term> terms, Table table) {
        Map<String, String> references = new HashMap<>();
        for (Term term : terms) {
            if (term instanceof LevelsTerm levels) {
                levels.chosenReference().ifPresent(level -> references.put(levels.column(), level));
            }
        }
        List<Effect> effects = new ArrayList<>();
        effects.add(new Effect.Baseline());
        for (Term term : terms) {
            if (term instanceof InteractionTerm both) {
                effects.add(new Effect.Product(
                        bind(both.first(), references, table), bind(both.second(), references, table)));
            } else if (term instanceof MainTerm main) {
                effects.add(bind(main, references, table));
            }
        }
        return new Design(effects);
    }

    /** Returns the number of columns, which is that of coefficients, the baseline included. */
    public int columnCount() {
        return columnNames.size();
    }

    /**
     * Returns the names of the coefficients: "baseline", "age (per 1)", "depot Quayside vs Harbour", "age (per 1) × doorType
     * Folding vs Sliding".
     */
    public List<String> columnNames() {
        return columnNames;
    }

    /** Returns the factors among the terms, in the order of the terms. */
    public List<Factor> factors() {
        return List.copyOf(factors.values());
    }

    /** Returns the factor in a column, if a term has one. */
    public Optional<Factor> factor(String column) {
        return Optional.ofNullable(factors.get(column));
    }

    /**
     * Returns the rows of a table coded by this design.
     *
     * @param table a table with the columns of the terms
     * @param response gives the count of a row
     * @param offset gives the part of the linear predictor of a row that has no coefficient
     * @throws IllegalArgumentException at once, or when a row is read, if a column is unknown, a value is missing or a level
     *     is not among those learned
     */
    public RowSource rows(Table table, IntToDoubleFunction response, IntToDoubleFunction offset) {
        List<CodedRows.Run> runs = new ArrayList<>();
        int first = 0;
        for (Effect effect : effects) {
            runs.add(new CodedRows.Run(first, effect.over(table)));
            first += effect.width();
        }
        return new CodedRows(table.rowCount(), first, runs, response, offset);
    }

    private static Effect bind(MainTerm term, Map<String, String> references, Table table) {
        return Effect.learn(term, Optional.ofNullable(references.get(term.column())), table);
    }

    private static void collect(Effect effect, Map<String, Factor> found) {
        if (effect instanceof Effect.Levels levels) {
            found.putIfAbsent(levels.factor().column(), levels.factor());
        } else if (effect instanceof Effect.Product product) {
            collect(product.first(), found);
            collect(product.second(), found);
        }
    }
}
