package countwright.table;

import countwright.show.Grid;
import countwright.show.Numbers;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.stream.IntStream;

/** The levels of one column of texts, the most common first. */
final class LevelSummary {

    private static final int NAMED = 4;

    private LevelSummary() {}

    static Grid grid() {
        return Grid.titled("")
                .textColumn("Texts")
                .numberColumn("missing")
                .numberColumn("distinct")
                .textColumn("most common");
    }

    static List<String> cells(TextColumn column) {
        int[] counts = new int[column.levels().size()];
        int present = 0;
        for (int row = 0; row < column.size(); row++) {
            if (!column.isMissing(row)) {
                counts[column.code(row)]++;
                present++;
            }
        }
        List<Integer> used = IntStream.range(0, counts.length)
                .filter(code -> counts[code] > 0)
                .boxed()
                .sorted(Comparator.comparing((Integer code) -> -counts[code]))
                .toList();
        List<String> common = new ArrayList<>();
        for (int code : used.subList(0, Math.min(NAMED, used.size()))) {
            common.add(column.levels().get(code) + " (" + Numbers.percent(counts[code] / (double) present) + ")");
        }
        boolean allDifferent = used.size() == present && present > NAMED;
        String rest = used.size() > NAMED ? ", …" : "";
        return List.of(
                column.name(),
                Numbers.count(column.size() - (long) present),
                Numbers.count(used.size()),
                present == 0 ? Numbers.ABSENT : allDifferent ? "each only once" : String.join(", ", common) + rest);
    }
}
