package countwright.fit;

/** The largest change of any row's linear predictor that a step in the coefficients makes. */
final class LargestShift implements Accumulator<LargestShift> {

    private final double[] step;
    private final boolean[] unbounded;
    private double largest;

    LargestShift(double[] step, boolean[] unbounded) {
        this.step = step;
        this.unbounded = unbounded;
    }

    @Override
    public void add(Block block) {
        for (int row = 0; row < block.size(); row++) {
            double shift = 0;
            boolean vanishes = false;
            for (Strip strip : block.strips()) {
                int column = strip.columns()[row];
                if (column != Strip.NONE) {
                    shift += step[column] * strip.values()[row];
                    vanishes |= unbounded[column] && strip.values()[row] != 0;
                }
            }
            if (!vanishes) {
                largest = Math.max(largest, Math.abs(shift));
            }
        }
    }

    @Override
    public void merge(LargestShift later) {
        largest = Math.max(largest, later.largest);
    }

    double value() {
        return largest;
    }
}
