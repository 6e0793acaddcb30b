package countwright.model;

import countwright.design.Factor;
import countwright.design.InteractionTerm;
import countwright.design.LinearTerm;
import countwright.design.Term;
import countwright.fit.ColumnState;
import countwright.fit.Estimate;
import countwright.show.Grid;
import countwright.show.MimeBundle;
import countwright.show.Numbers;
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

    private Grid ratios() {
        Grid grid = Grid.titled(title())
                .textColumn("effect")
                .numberColumn("rate ratio")
                .numberColumn(Interval.percent(model.level()) + " interval")
                .numberColumn("p");
        Estimate estimate = model.fit().estimate();
        Iterator<RateRatio> ratios = model.rateRatios().iterator();
        for (int column = 1; column < estimate.columnCount(); column++) {
            String name = model.fit().design().columnNames().get(column);
            if (estimate.state(column) == ColumnState.ESTIMATED) {
                RateRatio ratio = ratios.next();
                double standardError = ratio.ratio() * model.fit().standardError(column);
                grid = grid.row(
                        name,
                        Numbers.estimate(ratio.ratio(), standardError),
                        Numbers.interval(ratio.lower(), ratio.upper()),
                        Numbers.pValue(ratio.pValue()));
            } else if (estimate.state(column) == ColumnState.UNBOUNDED) {
                grid = grid.row(name, "no events", Numbers.ABSENT, Numbers.ABSENT);
            } else {
                grid = grid.row(name, "left out", Numbers.ABSENT, Numbers.ABSENT);
            }
        }
        return baseline(grid);
    }

    private Grid baseline(Grid grid) {
        BaselineRate baseline = model.baselineRate();
        RateUnit unit = RateUnit.fitting(baseline.rate(), model.spec().exposure());
        double standardError = baseline.rate() * model.fit().standardError(0);
        Grid withRow = grid.row(
                unit.label("baseline"),
                Numbers.estimate(unit.scaled(baseline.rate()), unit.scaled(standardError)),
                Numbers.interval(unit.scaled(baseline.lower()), unit.scaled(baseline.upper())),
                "");
        List<String> settings = baselineSettings();
        return settings.isEmpty() ? withRow : withRow.note("Baseline: " + String.join(", ", settings) + ".");
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
        grid = grid.row("degrees of freedom left", Numbers.count(df))
                .row("deviance", Numbers.significant(model.deviance(), 4))
                .row("deviance of the baseline alone", Numbers.significant(model.nullDeviance(), 4))
                .row("Pearson chi-square", Numbers.significant(model.pearsonChiSquare(), 4))
                .row("dispersion (Pearson / degrees of freedom)", dispersion)
                .row("log-likelihood", Numbers.fixed(model.logLikelihood(), 2))
                .row("AIC", Numbers.fixed(model.aic(), 2))
                .row("BIC", Numbers.fixed(model.bic(), 2));
        for (String notice : model.notices()) {
            grid = grid.note(notice);
        }
        return grid;
    }

    private String title() {
        String per = model.spec().exposure().map(name -> " per " + name).orElse("");
        return "What drives the rate: " + model.spec().response() + per + " ("
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
