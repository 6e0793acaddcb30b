package countwright.chart;

import countwright.table.Column;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;

/** Rows put together: by the value of a column, or by neighbourhood on a number. */
final class Groups {

    /** Some rows of a table under one name; at least one. */
    static final class Group {

        private final String name;
        private final int[] rows;

        private Group(String name, int[] rows) {
            this.name = name;
            this.rows = rows;
        }

        String name() {
            return name;
        }

        int size() {
            return rows.length;
        }

        int firstRow() {
            return rows[0];
        }

        IntStream rows() {
            return Arrays.stream(rows);
        }

        double sum(double[] values) {
            double sum = 0;
            for (int row : rows) {
                sum += values[row];
            }
            return sum;
        }
    }

    private Groups() {}

    /** Returns one group for each value of a column, in the order in which the values first appear. */
    static List<Group> byValue(Column column) {
        Map<String, List<Integer>> rows = new LinkedHashMap<>();
        for (int row = 0; row < column.size(); row++) {
            if (!column.isMissing(row)) {
                rows.computeIfAbsent(column.text(row), name -> new ArrayList<>())
                        .add(row);
            }
        }
        List<Group> groups = new ArrayList<>();
        rows.forEach((name, members) -> groups.add(
                new Group(name, members.stream().mapToInt(Integer::intValue).toArray())));
        return groups;
    }

    /**
     * Returns bins of about equal numbers of rows, in ascending order of a value. Rows of equal value stay together, so
     * there may be fewer bins than asked for.
     */
    static List<Group> byQuantile(double[] values, int most) {
        Integer[] order = new Integer[values.length];
        Arrays.setAll(order, i -> i);
        Arrays.sort(order, Comparator.comparingDouble(i -> values[i]));
        List<Group> bins = new ArrayList<>();
        int start = 0;
        for (int bin = 1; bin <= most && start < order.length; bin++) {
            int end = Math.max(start + 1, (int) Math.round((double) bin * order.length / most));
            while (end < order.length && values[order[end]] == values[order[end - 1]]) {
                end++;
            }
            int[] rows = new int[end - start];
            for (int i = start; i < end; i++) {
                rows[i - start] = order[i];
            }
            bins.add(new Group("bin " + (bins.size() + 1), rows));
            start = end;
        }
        return bins;
    }
}
