package countwright.chart;

import countwright.show.Grid;
import countwright.show.Numbers;
import countwright.table.Table;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Optional;

/** Observed rates of groups with their exact intervals: the picture before any model. */
final class RateChart {

    static final int MOST_ROWS = 60;
    private static final double LEVEL = 0.95;

    private record GroupRate(String name, double count, double exposure, ExactRate rate) {}

    private RateChart() {}

    static Chart of(Table table, String count, String exposure, String group) {
        Counted counted = Counted.read(table, count, Optional.of(exposure), group);
        double[] counts = counted.counts();
        double[] exposures = counted.exposures();
        List<GroupRate> all = new ArrayList<>();
        double totalCount = 0;
        double totalExposure = 0;
        for (Groups.Group members : Groups.byValue(counted.table().column(group))) {
            double events = members.sum(counts);
            double amount = members.sum(exposures);
            totalCount += events;
            totalExposure += amount;
            all.add(new GroupRate(members.name(), events, amount, ExactRate.of(events, amount, LEVEL)));
        }
        List<GroupRate> shown = largest(all);
        double pooled = totalCount / totalExposure;
        double highest = shown.stream().mapToDouble(g -> g.rate().rate()).max().orElse(0);
        RateText unit = RateText.forRates(count, exposure, Math.max(highest, pooled));
        return draw(counted, group, unit, shown, all.size(), pooled, totalCount, totalExposure);
    }

    private static Chart draw(
            Counted counted,
            String group,
            RateText unit,
            List<GroupRate> shown,
            int groupCount,
            double pooled,
            double totalCount,
            double totalExposure) {
        int size = shown.size();
        double[] rates =
                unit.scaled(shown.stream().mapToDouble(g -> g.rate().rate()).toArray());
        double[] lower =
                unit.scaled(shown.stream().mapToDouble(g -> g.rate().lower()).toArray());
        double[] upper =
                unit.scaled(shown.stream().mapToDouble(g -> g.rate().upper()).toArray());
        double[] y = new double[size];
        List<Figure.NamedRow> rows = new ArrayList<>();
        Grid grid = Grid.titled("")
                .textColumn(group)
                .numberColumn(counted.countName())
                .numberColumn(counted.unit())
                .numberColumn(unit.label())
                .numberColumn("95% interval");
        double end = 0;
        for (int i = 0; i < size; i++) {
            GroupRate g = shown.get(i);
            y[i] = size - i;
            end = Math.max(end, upper[i]);
            rows.add(new Figure.NamedRow(
                    g.name(), Numbers.compact(g.count()) + " / " + Numbers.significant(g.exposure(), 3)));
            grid = grid.row(
                    g.name(),
                    Numbers.compact(g.count()),
                    Numbers.significant(g.exposure(), 3),
                    unit.text(g.rate().rate()),
                    unit.interval(g.rate().lower(), g.rate().upper()));
        }
        Axis x = Axis.linearWithRoomAtZero(unit.label(), end, 7);
        Axis rowAxis = Axis.rows(size);
        String left = size == groupCount
                ? ""
                : " Shown are the " + size + " of " + Numbers.count(groupCount) + " groups with the largest exposure.";
        Figure figure = Figure.titled("Observed rate by " + group, x, rowAxis)
                .subtitle("All together: " + Numbers.compact(totalCount) + " " + counted.countName() + " in "
                        + Numbers.significant(totalExposure, 3) + " " + counted.unit() + ", or " + unit.text(pooled)
                        + unit.unit().suffix())
                .caption("Highest rate on top. Bars: exact 95% intervals (Garwood 1936), each group by itself, counts"
                        + " taken as Poisson." + left + counted.leftOutSentence())
                .rows(counted.countName() + " / " + counted.unit(), rows)
                .guide(Figure.Guide.up("all together", Ink.REFERENCE, rowAxis, pooled * unit.factor()))
                .layer(Layer.barsAcross("95% interval", Ink.OBSERVED, lower, upper, y))
                .layer(Layer.points("observed rate", Ink.OBSERVED, rates, y));
        GroupRate top = shown.get(0);
        GroupRate bottom = shown.get(size - 1);
        String summary = "Over " + Numbers.count(groupCount, "group") + " of " + group + ", "
                + unit.label() + " is " + unit.text(pooled) + "; it is highest in " + top.name() + " at "
                + unit.text(top.rate().rate(), top.rate().lower(), top.rate().upper())
                + (size == 1
                        ? "."
                        : " and lowest in " + bottom.name() + " at "
                                + unit.text(
                                        bottom.rate().rate(),
                                        bottom.rate().lower(),
                                        bottom.rate().upper()) + ".");
        return Chart.of(figure, summary, grid.toString());
    }

    private static List<GroupRate> largest(List<GroupRate> all) {
        return all.stream()
                .sorted(Comparator.comparingDouble(GroupRate::exposure).reversed())
                .limit(MOST_ROWS)
                .sorted(Comparator.comparingDouble((GroupRate g) -> g.rate().rate())
                        .reversed()
                        .thenComparing(GroupRate::name))
                .toList();
    }
}
