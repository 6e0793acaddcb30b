package countwright.chart;

import countwright.show.Numbers;
import java.util.ArrayList;
import java.util.List;

/** One axis: what it measures, from where to where, and the places that are named on it. */
record Axis(String title, Scale scale, double min, double max, List<Tick> ticks) {

    enum Scale {
        LINEAR {
            @Override
            double position(double value) {
                return value;
            }
        },
        LOG {
            @Override
            double position(double value) {
                return Math.log10(value);
            }
        };

        /** Returns where a value stands on a ruler of equal steps. */
        abstract double position(double value);
    }

    private static final char MINUS = '\u2212';

    record Tick(double value, String label) {}

    Axis {
        if (!(min < max) || !Double.isFinite(max - min)) {
            throw new IllegalArgumentException("an axis needs a finite range, but has " + min + " to " + max + ".");
        }
        ticks = List.copyOf(ticks);
    }

    /** Returns an axis of plain numbers that holds the given range with a little air, and zero where it is close. */
    static Axis linear(String title, double low, double high, int aboutTicks) {
        double span = high > low ? high - low : Math.max(Math.abs(high) * 0.2, 1e-9);
        double min = high > low ? low : low - span;
        double max = high > low ? high : high + span;
        boolean fromZero = low >= 0 && low < 0.4 * max;
        double air = 0.045 * (max - min);
        // Points at or near 0 are not cut at the edge.
        min = fromZero ? (low < 0.02 * max ? -0.02 * max : 0) : min - air;
        max = high <= 0 && low < 0 && max == 0 ? 0 : max + air;
        return new Axis(title, Scale.LINEAR, min, max, linearTicks(min, max, aboutTicks));
    }

    /** Returns an axis from zero, whose lowest points are not cut at the edge. */
    static Axis linearWithRoomAtZero(String title, double high, int aboutTicks) {
        double max = high > 0 ? high * 1.05 : 1;
        return new Axis(title, Scale.LINEAR, -0.02 * max, max, linearTicks(0, max, aboutTicks));
    }

    /** Returns an axis of equal ratios; both ends must be positive. */
    static Axis log(String title, double low, double high, int aboutTicks) {
        double ratio = Math.max(high / low, 1.2);
        double air = Math.pow(ratio, 0.05);
        double middle = Math.sqrt(low) * Math.sqrt(high);
        double min = Math.min(low, middle / Math.sqrt(ratio)) / air;
        double max = Math.max(high, middle * Math.sqrt(ratio)) * air;
        return new Axis(title + " (log axis)", Scale.LOG, min, max, logTicks(min, max, aboutTicks));
    }

    /** Returns an axis of rows 1 to n, the first on top, without names of its own. */
    static Axis rows(int count) {
        return new Axis("", Scale.LINEAR, 0.4, Math.max(count, 1) + 0.6, List.of());
    }

    /** Returns this axis with four-digit numbers written as years are, "2014", where it reaches no further. */
    Axis withYearsUngrouped() {
        if (min < 0 || max >= 10_000) {
            return this;
        }
        List<Tick> plain = ticks.stream()
                .map(tick -> new Tick(tick.value(), tick.label().replace(",", "")))
                .toList();
        return new Axis(title, scale, min, max, plain);
    }

    /** Returns where a value stands, 0 at the lower end and 1 at the upper. */
    double fraction(double value) {
        double start = scale.position(min);
        return (scale.position(value) - start) / (scale.position(max) - start);
    }

    static List<Tick> linearTicks(double min, double max, int about) {
        double rough = (max - min) / about;
        double power = Math.pow(10, Math.floor(Math.log10(rough)));
        double unit = rough / power;
        double step = (unit <= 1.1 ? 1 : unit <= 2.2 ? 2 : unit <= 5.5 ? 5 : 10) * power;
        int decimals = (int) Math.max(0, -Math.floor(Math.log10(step) + 1e-9));
        List<Tick> ticks = new ArrayList<>();
        for (long k = (long) Math.ceil(min / step - 1e-9); k * step <= max + step * 1e-9; k++) {
            String label = Numbers.fixed(k * step, decimals).replace('-', MINUS);
            ticks.add(new Tick(k * step, label));
        }
        return ticks;
    }

    /** Names powers of ten, and in narrow ranges 2 and 5 or every round value between them. */
    private static List<Tick> logTicks(double min, double max, int about) {
        double decades = Math.log10(max / min);
        List<Tick> ticks = new ArrayList<>();
        if (decades < 0.7) {
            for (Tick tick : linearTicks(min, max, about)) {
                ticks.add(new Tick(tick.value(), Numbers.compact(tick.value())));
            }
            return ticks;
        }
        int[] leaders = decades < 2.6 ? new int[] {1, 2, 5} : decades < 4.5 ? new int[] {1, 3} : new int[] {1};
        int stride = (int) Math.max(1, Math.ceil(decades / about));
        int firstDecade = (int) Math.floor(Math.log10(min));
        int lastDecade = (int) Math.ceil(Math.log10(max));
        for (int decade = firstDecade; decade <= lastDecade; decade++) {
            if (Math.floorMod(decade, stride) != 0) {
                continue;
            }
            for (int leader : leaders) {
                double value = leader * Math.pow(10, decade);
                if (value >= min && value <= max) {
                    ticks.add(new Tick(value, Numbers.compact(value)));
                }
            }
        }
        return ticks;
    }
}
