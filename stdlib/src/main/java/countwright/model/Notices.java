package countwright.model;

import countwright.fit.ColumnState;
import countwright.fit.Convergence;
import countwright.fit.Estimate;
import countwright.show.Numbers;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/** The sentences a reader of a fit must not miss. */
final class Notices {

    private static final int NAMED = 8;

    /** A departure of the dispersion from 1 that is not worth a word however many rows show it. */
    private static final double SLIGHT = 0.1;

    private Notices() {}

    static List<String> of(FittedModel model) {
        List<String> notices = new ArrayList<>(ofConvergence(model.fit()));
        notices.addAll(ofData(model));
        return List.copyOf(notices);
    }

    /** Returns the sentences on rows, columns and dispersion. */
    static List<String> ofData(FittedModel model) {
        Fit fit = model.fit();
        List<String> notices = new ArrayList<>();
        fit.leftOut().ifPresent(notices::add);
        List<String> unbounded = named(fit, ColumnState.UNBOUNDED);
        if (!unbounded.isEmpty()) {
            notices.add(
                    unbounded.size() == 1
                            ? "No finite estimate, because there is not one event in its rows: " + unbounded.get(0)
                                    + ". Its rate is estimated as 0; merge the level with another, leave it out, or give"
                                    + " an exact upper limit for its rate."
                            : "No finite estimates, because there is not one event in their rows: " + list(unbounded)
                                    + ". Their rates are estimated as 0; merge levels, leave them out, or give exact"
                                    + " upper limits for their rates.");
        }
        List<String> aliased = named(fit, ColumnState.ALIASED);
        if (!aliased.isEmpty()) {
            notices.add("Left out, because what stands before " + them(aliased) + " in the model already determines "
                    + them(aliased) + ": " + list(aliased) + ". Drop one of the terms that say the same.");
        }
        List<String> empty = named(fit, ColumnState.EMPTY);
        if (!empty.isEmpty()) {
            notices.add("Left out, because no row with events bears on " + them(empty) + ": " + list(empty) + ".");
        }
        List<String> undetermined = Arrays.stream(fit.estimated())
                .filter(fit::isUndetermined)
                .mapToObj(fit.design().columnNames()::get)
                .toList();
        if (!undetermined.isEmpty()) {
            notices.add("Not determined, because the rows can hardly tell " + them(undetermined)
                    + " from what else is in the model: " + list(undetermined)
                    + ". Drop one of the terms that say nearly the same.");
        }
        notices.addAll(ofDispersion(model));
        return List.copyOf(notices);
    }

    /** Returns a warning if the estimates are not the maximum of the likelihood. */
    static List<String> ofConvergence(Fit fit) {
        Convergence end = fit.estimate().convergence();
        if (end instanceof Convergence.NotConverged stopped) {
            return List.of("The iteration stopped after " + Numbers.count(stopped.iterations(), "step")
                    + " without reaching the maximum (Newton"
                    + " decrement " + Numbers.significant(stopped.decrement(), 2)
                    + "): do not use these estimates. Look for extreme values in the columns of the terms, or use fewer"
                    + " terms.");
        } else if (end instanceof Convergence.NoFiniteMaximum none) {
            List<String> names =
                    none.columns().stream().map(fit.design().columnNames()::get).toList();
            return List.of(
                    "There is no finite maximum: some combination of terms singles out rows without any event, so these"
                            + " coefficients grow without end: " + (names.isEmpty() ? "(not isolated)" : list(names))
                            + ". Do not use them; merge levels, or leave out the interaction or term that singles those rows out.");
        }
        return List.of();
    }

    /** Returns a sentence on the dispersion if it is not near 1 by more than chance. */
    static List<String> ofDispersion(FittedModel model) {
        int df = model.residualDegreesOfFreedom();
        if (df <= 0) {
            return List.of(
                    "There are as many coefficients as rows that bear on them, so nothing is left to judge the fit by.");
        }
        double margin = Math.max(SLIGHT, 2 * model.fit().estimate().summary().pearsonSpread() / df);
        double dispersion = model.dispersion();
        String start = "Dispersion " + Numbers.significant(dispersion, 2) + ": the counts vary ";
        String family = model.spec().family().name();
        if (dispersion > 1 + margin) {
            return List.of(start + "more than a " + family
                    + " model allows. These intervals are too narrow, by a factor of about "
                    + Numbers.significant(Math.sqrt(dispersion), 2)
                    + " if the excess is alike everywhere; look for a missing term or exposure, or for rows that belong"
                    + " together.");
        }
        if (dispersion < 1 - margin) {
            return List.of(start + "less than a " + family
                    + " model expects, as when they are limited or evened out. These intervals are wider than they need"
                    + " be.");
        }
        return List.of();
    }

    private static List<String> named(Fit fit, ColumnState state) {
        Estimate estimate = fit.estimate();
        List<String> names = new ArrayList<>();
        for (int column = 0; column < estimate.columnCount(); column++) {
            if (estimate.state(column) == state) {
                names.add(fit.design().columnNames().get(column));
            }
        }
        return names;
    }

    private static String them(List<String> names) {
        return names.size() == 1 ? "it" : "them";
    }

    private static String list(List<String> names) {
        return names.size() <= NAMED
                ? String.join("; ", names)
                : String.join("; ", names.subList(0, NAMED)) + "; and " + (names.size() - NAMED) + " more";
    }
}
