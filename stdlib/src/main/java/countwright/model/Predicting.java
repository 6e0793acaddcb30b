package countwright.model;

import countwright.fit.Convergence;
import countwright.fit.RowFits;
import countwright.fit.RowSource;
import countwright.show.NearNames;
import countwright.table.NumberColumn;
import countwright.table.Table;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import java.util.function.DoublePredicate;

/** From a fitted model and new rows to predictions. */
final class Predicting {

    private Predicting() {}

    static Predictions predict(FittedModel model, Table scenarios) {
        CountModel spec = model.spec();
        checkColumns(spec, scenarios);
        Optional<NumberColumn> exposures =
                spec.exposure().filter(scenarios::has).map(scenarios::numbers);
        exposures.ifPresent(column -> check(
                scenarios, column, e -> e > 0 && e < Double.POSITIVE_INFINITY, "exposure must be positive and finite"));
        spec.offset()
                .map(scenarios::numbers)
                .ifPresent(column -> check(scenarios, column, Double::isFinite, "an offset must be a finite number"));
        RowSource rows = model.fit().design().rows(scenarios, row -> 0, Fitting.offset(spec, scenarios));
        RowFits fits = RowFits.of(rows, model.fit().estimate());
        List<Predictions.LogRate> logRates = new ArrayList<>();
        boolean settled = model.convergence() instanceof Convergence.Converged;
        boolean doubtful = false;
        boolean vanishing = false;
        for (int row = 0; row < fits.size(); row++) {
            int at = row;
            double exposure = exposures.map(column -> column.value(at)).orElse(1.0);
            boolean vanishes = Double.isInfinite(fits.variance(row));
            if (!vanishes && settled && !isInRange(fits.mean(row) / exposure)) {
                throw new IllegalArgumentException("row " + (row + 1) + " of " + scenarios.source()
                        + " is so far from the rows fitted that its rate is too "
                        + (fits.mean(row) > 1 ? "large" : "small")
                        + " for a number. Correct its covariates, or predict nearer to what was observed.");
            }
            logRates.add(new Predictions.LogRate(
                    exposure, Math.log(fits.mean(row) / exposure), Math.sqrt(fits.variance(row))));
            doubtful |= fits.isDoubtful(row);
            vanishing |= vanishes;
        }
        return new Predictions(spec, scenarios, logRates, notes(model, scenarios, doubtful, vanishing), model.level());
    }

    private static List<String> notes(FittedModel model, Table scenarios, boolean doubtful, boolean vanishing) {
        List<String> notes = new ArrayList<>();
        notes.add("Intervals are for the mean; a single future count varies more.");
        model.spec()
                .exposure()
                .filter(name -> !scenarios.has(name))
                .ifPresent(name -> notes.add("The table has no column '" + name
                        + "', so there are rates but no expected counts; in code, rates are per 1 " + name + "."));
        if (doubtful) {
            notes.add(
                    "Some rows have a value for a coefficient that was left out of the fit; they are predicted as if what"
                            + " held among the rows fitted held for them too.");
        }
        if (vanishing) {
            notes.add(
                    "A rate of 0 stands for a level without a single event in the fit; the fit gives no upper limit for"
                            + " it.");
        }
        notes.addAll(Notices.ofConvergence(model.fit()));
        notes.addAll(Notices.ofDispersion(model));
        return notes;
    }

    private static boolean isInRange(double rate) {
        return rate >= Double.MIN_NORMAL && rate <= Double.MAX_VALUE;
    }

    private static void checkColumns(CountModel spec, Table scenarios) {
        Set<String> needed = new LinkedHashSet<>();
        spec.terms().forEach(term -> needed.addAll(term.columns()));
        spec.offset().ifPresent(needed::add);
        for (String name : needed) {
            if (!scenarios.has(name)) {
                String question = NearNames.question(name, scenarios.columnNames());
                throw new IllegalArgumentException("a prediction needs the column '" + name + "', but "
                        + scenarios.source() + " has " + NearNames.list(scenarios.columnNames()) + "."
                        + (question.isEmpty() ? "" : " " + question + " Rename it with named(\"" + name + "\")."));
            }
        }
    }

    private static void check(Table table, NumberColumn column, DoublePredicate permitted, String rule) {
        for (int row = 0; row < column.size(); row++) {
            if (!permitted.test(column.value(row))) {
                String found = column.isMissing(row) ? "missing" : column.text(row);
                throw new IllegalArgumentException(rule + ", but row " + (row + 1) + " of column '" + column.name()
                        + "' in " + table.source() + " is " + found + ". Correct the row, or leave it out.");
            }
        }
    }
}
