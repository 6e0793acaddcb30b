package countwright.model;

import countwright.fit.ColumnState;
import countwright.fit.Convergence;
import countwright.fit.Estimate;
import countwright.show.Numbers;
import java.util.ArrayList;
import java.util.List;

/** The sentences a reader of a fit must not miss. */
final class Notices {

    private static final int NAMED = 8;

    private Notices() {}

    static List<String> of(FittedModel model) {
        Fit fit = model.fit();
        List<String> notices = new ArrayList<>();
        convergence(fit, notices);
        fit.leftOut().ifPresent(notices::add);
        List<String> unbounded = named(fit, ColumnState.UNBOUNDED);
        if (!unbounded.isEmpty()) {
            notices.add("No finite estimate, because there is not one event in its rows: " + list(unbounded)
                    + ". Its rate is estimated as 0; merge the level with another, leave it out, or give an exact upper limit"
                    + " for its rate. The other estimates are not affected.");
        }
        List<String> aliased = named(fit, ColumnState.ALIASED);
        if (!aliased.isEmpty()) {
            notices.add("Left out, because the terms before it already determine it: " + list(aliased)
                    + ". Drop one of the terms that say the same.");
        }
        List<String> empty = named(fit, ColumnState.EMPTY);
        if (!empty.isEmpty()) {
            notices.add("Left out, because no row with events bears on it: " + list(empty) + ".");
        }
        dispersion(model, notices);
        return List.copyOf(notices);
    }

    private static void convergence(Fit fit, List<String> notices) {
        Convergence end = fit.estimate().convergence();
        if (end instanceof Convergence.NotConverged stopped) {
            notices.add("The iteration stopped after " + stopped.iterations()
                    + " steps without reaching the maximum (Newton"
                    + " decrement " + Numbers.significant(stopped.decrement(), 2)
                    + "): do not use these estimates. Look for extreme values in the columns of the terms, or use fewer"
                    + " terms.");
        } else if (end instanceof Convergence.NoFiniteMaximum none) {
            List<String> names =
                    none.columns().stream().map(fit.design().columnNames()::get).toList();
            notices.add(
                    "There is no finite maximum: some combination of terms singles out rows without any event, so these"
                            + " coefficients would grow for ever: " + (names.isEmpty() ? "(not isolated)" : list(names))
                            + ". Do not use them; merge levels, or leave out the interaction or term that singles those rows out.");
        }
    }

    private static void dispersion(FittedModel model, List<String> notices) {
        int df = model.residualDegreesOfFreedom();
        if (df <= 0) {
            notices.add(
                    "There are as many coefficients as rows that bear on them, so nothing is left to judge the fit by.");
            return;
        }
        double dispersion = model.dispersion();
        double chance = 2 * Math.sqrt(2.0 / df);
        String value = Numbers.significant(dispersion, 2);
        if (dispersion > 1 + Math.max(0.1, chance)) {
            notices.add("Dispersion " + value + ": the counts vary more than a "
                    + model.spec().family().name()
                    + " model allows. These intervals are too narrow, by a factor of about "
                    + Numbers.significant(Math.sqrt(dispersion), 2)
                    + " if the excess is alike everywhere; look for a missing term or exposure, or for rows that belong"
                    + " together.");
        } else if (dispersion < 1 - Math.max(0.1, chance)) {
            notices.add("Dispersion " + value + ": the counts vary less than a "
                    + model.spec().family().name()
                    + " model expects, as when they are limited or evened out. These intervals are wider than they need"
                    + " be.");
        }
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

    private static String list(List<String> names) {
        return names.size() <= NAMED
                ? String.join("; ", names)
                : String.join("; ", names.subList(0, NAMED)) + "; and " + (names.size() - NAMED) + " more";
    }
}
