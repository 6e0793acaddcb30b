package countwright.chart;

import java.nio.file.Path;

/** Draws a chart in a process of its own, started by {@link FontsTest} with a fontconfig file of its choice. */
final class BareMachine {

    private BareMachine() {}

    public static void main(String[] args) {
        var depots = SyntheticFit.depots(4);
        Fit fit = SyntheticFit.of(SyntheticFit.faults(36, depots, 0, 41), depots);
        RateRatioChart.of(fit).save(Path.of(args[0]));
    }
}
