package countwright.chart;

import countwright.design.Term;
import countwright.design.Terms;
import countwright.model.Prediction;
import countwright.model.RateRatio;
import countwright.model.Residual;
import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.Random;
import org.apache.commons.math3.distribution.PoissonDistribution;
import org.apache.commons.math3.random.RandomGenerator;
import org.apache.commons.math3.random.Well19937c;

/** Invented data with a known truth, and what charts read of a model that has found that truth exactly. */
final class SyntheticFit {

    private static final double SLOPE = 0.06;

    private SyntheticFit() {}

    /** Returns door faults of trams: age, depot, vehicle-kilometres and counts; rates near 4 in 1,000 km. */
    static Table faults(int rows, List<String> depots, double overdispersion, long seed) {
        Random random = new Random(seed);
        RandomGenerator counts = new Well19937c(seed);
        double[] age = new double[rows];
        double[] km = new double[rows];
        double[] faults = new double[rows];
        String[] depot = new String[rows];
        for (int row = 0; row < rows; row++) {
            age[row] = 1 + random.nextInt(300) / 10.0;
            km[row] = 200 + Math.rint(4000 * random.nextDouble());
            depot[row] = depots.get(row % depots.size());
            double gamma = overdispersion == 0 ? 1 : Math.exp(overdispersion * random.nextGaussian());
            double mean = rate(age[row], depot[row], depots) * km[row] * gamma;
            faults[row] = mean < 1e-9 ? 0 : new PoissonDistribution(counts, mean, 1e-12, 100_000).sample();
        }
        return Table.of(
                NumberColumn.of("age", age),
                TextColumn.of("depot", depot),
                NumberColumn.of("vehicleKm", km),
                NumberColumn.of("faults", faults));
    }

    static Fit of(Table table, List<String> depots) {
        int rows = table.rowCount();
        double[] counts = table.numbers("faults").toArray();
        double[] km = table.numbers("vehicleKm").toArray();
        double[] means = new double[rows];
        for (int row = 0; row < rows; row++) {
            means[row] = km[row]
                    * rate(
                            table.numbers("age").value(row),
                            table.column("depot").text(row),
                            depots);
        }
        List<Term> terms = List.of(Terms.linear("age"), Terms.levels("depot"));
        return new Fit(
                "faults",
                "vehicleKm",
                Optional.empty(),
                terms,
                table,
                () -> counts,
                () -> km,
                () -> means,
                1 + depots.size(),
                "",
                0.95,
                kind -> residuals(kind, counts, means),
                scenarios -> predict(scenarios, depots),
                ratios(depots));
    }

    static List<String> depots(int count) {
        List<String> names = new ArrayList<>(List.of("Harbour", "Quayside", "Mill Lane", "North Yard"));
        for (int i = names.size(); i < count; i++) {
            names.add("Depot " + (i + 1));
        }
        return names.subList(0, count);
    }

    private static double rate(double age, String depot, List<String> depots) {
        int i = depots.indexOf(depot);
        return 0.0022 * Math.exp(SLOPE * age + 0.35 * Math.sin(1.7 * i));
    }

    private static List<Prediction> predict(Table scenarios, List<String> depots) {
        List<Prediction> rows = new ArrayList<>();
        for (int row = 0; row < scenarios.rowCount(); row++) {
            double age = scenarios.numbers("age").value(row);
            String depot = scenarios.column("depot").text(row);
            double rate = rate(age, depot, depots);
            double error = 0.05 + 0.006 * Math.abs(age - 15) + 0.04 * (depots.indexOf(depot) % 3);
            double low = rate * Math.exp(-1.96 * error);
            double high = rate * Math.exp(1.96 * error);
            rows.add(new Prediction(row, 1, rate, low, high, rate, low, high));
        }
        return rows;
    }

    private static double[] residuals(Residual kind, double[] counts, double[] means) {
        double[] residuals = new double[counts.length];
        for (int row = 0; row < counts.length; row++) {
            double y = counts[row];
            double m = means[row];
            residuals[row] = kind == Residual.PEARSON
                    ? (y - m) / Math.sqrt(m)
                    : Math.signum(y - m) * Math.sqrt(2 * ((y == 0 ? 0 : y * Math.log(y / m)) - (y - m)));
        }
        return residuals;
    }

    private static List<RateRatio> ratios(List<String> depots) {
        List<RateRatio> ratios = new ArrayList<>();
        ratios.add(new RateRatio("age (per 1)", Math.exp(SLOPE), Math.exp(SLOPE - 0.01), Math.exp(SLOPE + 0.01), 0.0));
        for (int i = 1; i < depots.size(); i++) {
            double effect = 0.35 * Math.sin(1.7 * i);
            double error = 0.05 + 0.03 * (i % 4);
            ratios.add(new RateRatio(
                    "depot " + depots.get(i) + " vs " + depots.get(0),
                    Math.exp(effect),
                    Math.exp(effect - 1.96 * error),
                    Math.exp(effect + 1.96 * error),
                    0.5));
        }
        return ratios;
    }
}
