package countwright.model;

import java.util.List;

/** The covariance matrix of the coefficients, symmetric, in their order. Immutable. */
public final class Covariance {

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
}
