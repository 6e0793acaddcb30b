package countwright.model;

import countwright.design.Factor;
import countwright.design.InteractionTerm;
import countwright.design.LinearTerm;
import countwright.design.Term;
import countwright.fit.ColumnState;
import countwright.fit.Convergence;
import countwright.fit.Estimate;
import countwright.show.Grid;
import countwright.show.MimeBundle;
import countwright.show.Numbers;
import countwright.show.RateUnit;
import java.util.ArrayList;
import java.util.Iterator;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;

/** Lays out a fitted model for its reader: what drives the rate and how sure that is, then how well the model holds. */
final class ModelReport {

    private final FittedModel model;

    ModelReport(FittedModel model) {
        this.model = model;
    }

    MimeBundle bundle() {
        MimeBundle ratios = ratios().display();
        MimeBundle hold = hold().display();
        String text = ratios.plainText() + "\n\n" + hold.plainText();
        String html = ratios.get(MimeBundle.HTML).orElse("")
                + hold.get(MimeBundle.HTML).orElse("");
        return html.isEmpty() ? MimeBundle.text(text) : MimeBundle.text(text).withHtml(html);
    }

    /** Returns the rate ratios and the baseline rate, with the warning not to use them where there is one. */
    Grid ratios() {
        Grid grid = Grid.titled(title())
                .textColumn("effect")
                .numberColumn("rate ratio")
                .numberColumn(Interval.percent(model.level()) + " interval")
                .numberColumn("p");
        Iterator<RateRatio> ratios = model.rateRatios().iterator();
        Estimate estimate = model.fit().estimate();
        for (int column = 1; column < estimate.columnCount(); column++) {
            String name = model.design().columnNames().get(column);
            if (estimate.state(column) == ColumnState.ESTIMATED) {
                grid = row(grid, column, ratios.next());
            } else {
                String reason = estimate.state(column) == ColumnState.UNBOUNDED ? "no events" : "left out";
                grid = grid.row(name, reason, Numbers.ABSENT, Numbers.ABSENT);
            }
        }
        grid = baseline(grid);
        for (String warning : Notices.ofConvergence(model.fit())) {
            grid = grid.note(warning);
        }
        return grid;
    }

    private Grid row(Grid grid, int column, RateRatio ratio) {
        if (grows(column)) {
            return grid.row(ratio.name(), "not finite", Numbers.ABSENT, Numbers.ABSENT);
        }
        if (model.fit().isUndetermined(column)) {
            return grid.row(ratio.name(), "not determined", Numbers.ABSENT, Numbers.ABSENT);
        }
        return grid.row(ratio.name(), ratio.ratioText(), ratio.intervalText(), Numbers.pValue(ratio.pValue()));
    }

    private boolean grows(int column) {
        return model.convergence() instanceof Convergence.NoFiniteMaximum none
                && none.columns().contains(column);
    }

    private Grid baseline(Grid grid) {
        BaselineRate baseline = model.baselineRate();
        RateUnit unit =
                RateUnit.fitting(grows(0) ? 1 : baseline.rate(), model.spec().exposure());
        double standardError = baseline.rate() * model.fit().standardError(0);
        Rounded rounded = grows(0)
                ? new Rounded("not finite", Numbers.ABSENT)
                : Rounded.of(
                        unit.scaled(baseline.rate()),
                        unit.scaled(standardError),
                        unit.scaled(baseline.lower()),
                        unit.scaled(baseline.upper()));
        Grid withRow = grid.row(baselineName(unit), rounded.estimate(), rounded.interval(), "");
        List<String> settings = baselineSettings();
        return settings.isEmpty() ? withRow : withRow.note("Baseline: " + String.join(", ", settings) + ".");
    }

    private static String baselineName(RateUnit unit) {
        return unit.exposure().isEmpty() ? "baseline mean" : "baseline rate" + unit.suffix();
    }

    private Grid hold() {
        Grid grid = Grid.titled("How well it holds").textColumn("measure").numberColumn("value");
        grid = grid.row("events", Numbers.compact(model.totalCount()))
                .row("rows used", Numbers.count(model.rowCount()));
        if (model.spec().exposure().isPresent()) {
            grid = grid.row(
                    "total exposure (" + model.spec().exposure().get() + ")", Numbers.compact(model.totalExposure()));
        }
        int df = model.residualDegreesOfFreedom();
        String dispersion = df > 0 ? Numbers.significant(model.dispersion(), 3) : Numbers.ABSENT;
        grid = grid.row("residual degrees of freedom", Numbers.count(df))
                .row("deviance", misfit(model.deviance()))
                .row("deviance of the baseline alone", misfit(model.nullDeviance()))
                .row("Pearson chi-square", misfit(model.pearsonChiSquare()))
                .row("dispersion (Pearson / residual df)", dispersion)
                .row("log-likelihood", Numbers.fixed(model.logLikelihood(), 2))
                .row("AIC", Numbers.fixed(model.aic(), 2))
                .row("BIC", Numbers.fixed(model.bic(), 2));
        for (String notice : Notices.ofData(model)) {
            grid = grid.note(notice);
        }
        return grid;
    }

    /** Returns a sum of squared residuals as text; below a billionth it is rounding, and the fit is exact. */
    private static String misfit(double value) {
        return Numbers.significant(Math.abs(value) < 1e-9 ? 0 : value, 4);
    }

    private String title() {
        String per = model.spec().exposure().map(name -> " per " + name).orElse("");
        String driven = per.isEmpty() ? "What drives the mean count: " : "What drives the rate: ";
        return driven + model.spec().response() + per + " ("
                + model.spec().family().name() + ", log link)";
    }

    private List<String> baselineSettings() {
        Set<String> settings = new LinkedHashSet<>();
        for (Term term : model.terms()) {
            describe(term, settings);
        }
        return new ArrayList<>(settings);
    }

    private void describe(Term term, Set<String> settings) {
        if (term instanceof InteractionTerm both) {
            describe(both.first(), settings);
            describe(both.second(), settings);
        } else if (term instanceof LinearTerm linear) {
            settings.add(linear.column() + " 0");
        } else {
            String column = term.columns().get(0);
            settings.add(column + " "
                    + model.fit().design().factor(column).map(Factor::reference).orElse("at its reference"));
        }
    }
}
