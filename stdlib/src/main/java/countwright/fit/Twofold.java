package countwright.fit;

/**
 * A number held as the unevaluated sum of two doubles, which gives it about 32 digits. Source: Y. Hida, X. S. Li and D. H.
 * Bailey, <em>Algorithms for Quad-Double Precision Floating Point Arithmetic</em>, 2001, section 3.
 *
 * @param high the number rounded to a double
 * @param low what the rounding left over
 */
record Twofold(double high, double low) {

    static final Twofold ZERO = new Twofold(0, 0);

    /** Returns {@code a + b} for any two doubles, without error. */
    static Twofold sum(double a, double b) {
        double s = a + b;
        double t = s - a;
        return new Twofold(s, (a - (s - t)) + (b - t));
    }

    /** Returns {@code a * b}, without error unless it underflows. */
    static Twofold product(double a, double b) {
        double p = a * b;
        return new Twofold(p, Math.fma(a, b, -p));
    }

    Twofold plus(Twofold other) {
        Twofold s = sum(high, other.high);
        return normal(s.high, s.low + (low + other.low));
    }

    Twofold minus(Twofold other) {
        return plus(new Twofold(-other.high, -other.low));
    }

    Twofold times(Twofold other) {
        Twofold p = product(high, other.high);
        return normal(p.high, p.low + (high * other.low + low * other.high));
    }

    Twofold over(Twofold divisor) {
        double first = high / divisor.high;
        Twofold rest = minus(divisor.times(new Twofold(first, 0)));
        double second = rest.high / divisor.high;
        double third = rest.minus(divisor.times(new Twofold(second, 0))).high / divisor.high;
        return normal(first, second).plus(new Twofold(third, 0));
    }

    /** Returns the square root; the number is above 0. */
    Twofold root() {
        double first = Math.sqrt(high);
        double rest = minus(product(first, first)).high;
        return normal(first, rest / (2 * first));
    }

    double value() {
        return high + low;
    }

    private static Twofold normal(double a, double b) {
        double s = a + b;
        return new Twofold(s, b - (s - a));
    }
}
