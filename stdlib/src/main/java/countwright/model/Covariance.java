package countwright.model;

import countwright.show.Displayable;
import countwright.show.Grid;
import countwright.show.MimeBundle;
import countwright.show.Numbers;
import java.util.List;

/** The covariance matrix of the coefficients, symmetric, in their order. Immutable. */
public final class Covariance implements Displayable {

    private final List<String> names;
    private final double[][] values;

    Covariance(List<String> names, double[][] values) {
        this.names = List.copyOf(names);
        this.values = values;
    }

    /** Returns the names of the coefficients, in the order of rows and columns. */
    public List<String> names() {
        return names;
    }

    /** Returns the number of coefficients. */
    public int size() {
        return values.length;
    }

    /** Returns the covariance of two coefficients by position, counted from 0. */
    public double get(int row, int column) {
        return values[row][column];
    }

    /** Returns a copy of the matrix, size × size. */
    public double[][] toArray() {
        double[][] copy = new double[values.length][];
        for (int i = 0; i < copy.length; i++) {
            copy[i] = values[i].clone();
        }
        return copy;
    }

    /** Shows the matrix with its columns numbered as its rows are; entries in four significant digits. */
    @Override
    public MimeBundle display() {
        return grid().display();
    }

    @Override
    public String toString() {
        return grid().toString();
    }

    private Grid grid() {
        Grid grid = Grid.titled("Covariance of the coefficients, log scale").textColumn("coefficient");
        for (int column = 1; column <= size(); column++) {
            grid = grid.numberColumn(Integer.toString(column));
        }
        for (int row = 0; row < size(); row++) {
            String[] cells = new String[size() + 1];
            cells[0] = (row + 1) + " " + names.get(row);
            for (int column = 0; column < size(); column++) {
                cells[column + 1] = Numbers.significant(values[row][column], 4);
            }
            grid = grid.row(cells);
        }
        return grid;
    }
}
