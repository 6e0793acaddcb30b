package countwright.model;

import countwright.show.Displayable;
import countwright.show.Grid;
import countwright.show.MimeBundle;
import countwright.show.Numbers;
import countwright.show.RateUnit;
import countwright.table.Table;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import java.util.stream.IntStream;

/** Predictions for the rows of a table, in their order. Immutable. */
public final class Predictions implements Displayable {

    /** The rate of a row per unit of exposure, on the log scale. */
    record LogRate(double exposure, double estimate, double standardError) {}

    private final CountModel spec;
    private final Table table;
    private final List<LogRate> logRates;
    private final List<String> notes;
    private final double level;

    Predictions(CountModel spec, Table table, List<LogRate> logRates, List<String> notes, double level) {
        this.spec = spec;
        this.table = table;
        this.logRates = List.copyOf(logRates);
        this.notes = List.copyOf(notes);
        this.level = level;
    }

    /** Returns the table predicted for. */
    public Table table() {
        return table;
    }

    /** Returns one prediction for each row of the table. */
    public List<Prediction> rows() {
        double z = Interval.halfWidth(level);
        List<Prediction> rows = new ArrayList<>();
        for (int row = 0; row < logRates.size(); row++) {
            rows.add(prediction(row, z));
        }
        return List.copyOf(rows);
    }

    /**
     * Returns the prediction for a row, counted from 0.
     *
     * @throws IndexOutOfBoundsException if there is no such row
     */
    public Prediction row(int row) {
        return prediction(row, Interval.halfWidth(level));
    }

    /** Returns the confidence level of the intervals, that of the model unless chosen. */
    public double level() {
        return level;
    }

    /**
     * Returns the same predictions with intervals of another confidence level.
     *
     * @throws IllegalArgumentException if the level is not above 0 and below 1
     */
    public Predictions at(double newLevel) {
        Interval.halfWidth(newLevel);
        return new Predictions(spec, table, logRates, notes, newLevel);
    }

    /** Returns what the reader should know: what the intervals are, what was assumed. */
    public List<String> notes() {
        return notes;
    }

    @Override
    public MimeBundle display() {
        return grid().display();
    }

    @Override
    public String toString() {
        return display().plainText();
    }

    private Prediction prediction(int row, double z) {
        LogRate logRate = logRates.get(row);
        double exposure = logRate.exposure();
        double rate = Math.exp(logRate.estimate());
        // A rate of 0 has no standard error: the fit knows that no event was seen, and nothing of how many there could
        // be.
        double lower = rate == 0 ? 0 : Math.exp(logRate.estimate() - z * logRate.standardError());
        double upper =
                rate == 0 ? Double.POSITIVE_INFINITY : Math.exp(logRate.estimate() + z * logRate.standardError());
        return new Prediction(row, exposure, rate * exposure, lower * exposure, upper * exposure, rate, lower, upper);
    }

    private Grid grid() {
        boolean expected = spec.exposure().filter(table::has).isPresent();
        List<Prediction> predictions = rows();
        double typical = predictions.stream()
                .mapToDouble(Prediction::rate)
                .filter(rate -> rate > 0)
                .average()
                .orElse(1);
        RateUnit unit = RateUnit.fitting(typical, spec.exposure());
        List<String> alike = predictions.size() > 1 ? alike(shownColumns(expected)) : List.of();
        List<String> shown = new ArrayList<>(shownColumns(expected));
        shown.removeAll(alike);
        String caption =
                "Predicted " + spec.response() + (spec.exposure().isPresent() ? ", with the rate" + unit.suffix() : "");
        Grid grid = Grid.titled(caption).numberColumn("row");
        for (String name : shown) {
            grid = table.column(name).kind().equals("numbers") ? grid.numberColumn(name) : grid.textColumn(name);
        }
        String interval = Interval.percent(level) + " interval";
        if (expected) {
            grid = grid.numberColumn("expected " + spec.response()).numberColumn(interval);
        }
        grid = grid.numberColumn(spec.exposure().isPresent() ? "rate" : "expected " + spec.response())
                .numberColumn(interval);
        List<List<String>> lines = new ArrayList<>();
        for (Prediction prediction : predictions) {
            lines.add(line(prediction, shown, expected, unit));
        }
        grid = grid.rows(lines);
        if (!alike.isEmpty()) {
            grid = grid.note("The same in every row: "
                    + String.join(
                            ", ",
                            alike.stream()
                                    .map(name -> name + " " + table.column(name).text(0))
                                    .toList())
                    + ".");
        }
        for (String note : notes) {
            grid = grid.note(note);
        }
        return grid;
    }

    /** Returns the columns that hold one value throughout, which need not be repeated in every row. */
    private List<String> alike(List<String> names) {
        return names.stream()
                .filter(name -> IntStream.range(1, table.rowCount())
                        .allMatch(row -> table.column(name)
                                .text(row)
                                .equals(table.column(name).text(0))))
                .toList();
    }

    private List<String> line(Prediction prediction, List<String> shown, boolean expected, RateUnit unit) {
        List<String> cells = new ArrayList<>();
        cells.add(Numbers.count(prediction.row() + 1L));
        for (String name : shown) {
            cells.add(table.column(name).text(prediction.row()));
        }
        double relativeError = logRates.get(prediction.row()).standardError();
        if (expected) {
            double mean = prediction.mean();
            add(cells, Rounded.of(mean, mean * relativeError, prediction.meanLower(), prediction.meanUpper()));
        }
        double rate = unit.scaled(prediction.rate());
        double lower = unit.scaled(prediction.rateLower());
        add(cells, Rounded.of(rate, rate * relativeError, lower, unit.scaled(prediction.rateUpper())));
        return cells;
    }

    private static void add(List<String> cells, Rounded rounded) {
        cells.add(rounded.estimate());
        cells.add(rounded.interval());
    }

    private List<String> shownColumns(boolean expected) {
        Set<String> names = new LinkedHashSet<>();
        spec.terms().forEach(term -> names.addAll(term.columns()));
        if (expected) {
            spec.exposure().ifPresent(names::add);
        }
        return List.copyOf(names);
    }
}
