package countwright.model;

import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.util.Random;

/** Invented counts with exposure, a column of numbers and two factors, for tests of properties. */
final class InventedRides {

    private InventedRides() {}

    static Table table(int rows, long seed) {
        Random random = new Random(seed);
        double[] counts = new double[rows];
        double[] exposure = new double[rows];
        double[] age = new double[rows];
        String[] depot = new String[rows];
        String[] door = new String[rows];
        for (int row = 0; row < rows; row++) {
            age[row] = Math.rint(300 * random.nextDouble()) / 10;
            exposure[row] = 50 + Math.rint(1000 * random.nextDouble());
            depot[row] = new String[] {"Harbour", "Mill", "Quayside"}[random.nextInt(3)];
            door[row] = random.nextBoolean() ? "Folding" : "Sliding";
            double slope = door[row].equals("Folding") ? 0.06 : 0.03;
            double mean = exposure[row] * Math.exp(-5 + slope * age[row] + (depot[row].equals("Mill") ? 0.4 : 0));
            counts[row] = poisson(mean, random);
        }
        return Table.of(
                NumberColumn.of("faults", counts),
                NumberColumn.of("km", exposure),
                NumberColumn.of("age", age),
                TextColumn.of("depot", depot),
                TextColumn.of("door", door));
    }

    /** Counts arrivals of unit rate, which is slow for large means and exact for all. */
    private static int poisson(double mean, Random random) {
        int count = 0;
        double time = -Math.log(1 - random.nextDouble());
        while (time < mean) {
            count++;
            time -= Math.log(1 - random.nextDouble());
        }
        return count;
    }
}
