package countwright.design;

/** Placeholder. */
final class Factor {
    private Factor() {}

    static String levelText(double level) {
        if (level == Math.rint(level) && Math.abs(level) < 1e15) {
            return Long.toString((long) level);
        }
        return Double.toString(level);
    }
}
