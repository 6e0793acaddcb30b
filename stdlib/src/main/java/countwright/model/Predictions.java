package countwright.model;

import countwright.show.Displayable;
import countwright.show.MimeBundle;
import countwright.table.Table;
import java.util.List;

/** Predictions for the rows of a table, in their order. */
public final class Predictions implements Displayable {

    private final Table table;
    private final List<Prediction> rows;
    private final double level;

    Predictions(Table table, List<Prediction> rows, double level) {
        this.table = table;
        this.rows = List.copyOf(rows);
        this.level = level;
    }

    /** Returns the table predicted for. */
    public Table table() {
        return table;
    }

    /** Returns one prediction for each row of the table. */
    public List<Prediction> rows() {
        return rows;
    }

    /** Returns the confidence level of the intervals, 0.95 unless chosen. */
    public double level() {
        return level;
    }

    /** Returns the same predictions with intervals of another confidence level, between 0 and 1. */
    public Predictions at(double newLevel) {
        return new Predictions(table, rows, newLevel);
    }

    @Override
    public MimeBundle display() {
        return MimeBundle.text(toString());
    }
}
