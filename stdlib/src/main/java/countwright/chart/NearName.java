package countwright.chart;

import java.util.Locale;

/** Whether a name could be another one mistyped. */
final class NearName {

    private NearName() {}

    /** Returns whether two names differ by a few letters, in case only, or one is the start of the other. */
    static boolean isNear(String typed, String name) {
        String a = typed.toLowerCase(Locale.ROOT);
        String b = name.toLowerCase(Locale.ROOT);
        if (Math.min(a.length(), b.length()) >= 3 && (b.startsWith(a) || a.startsWith(b))) {
            return true;
        }
        return distance(a, b) <= Math.max(1, Math.min(a.length(), b.length()) / 3);
    }

    /** Counts letters to insert, drop or exchange (Levenshtein's distance). */
    private static int distance(String a, String b) {
        int[] above = new int[b.length() + 1];
        for (int j = 0; j <= b.length(); j++) {
            above[j] = j;
        }
        for (int i = 1; i <= a.length(); i++) {
            int[] row = new int[b.length() + 1];
            row[0] = i;
            for (int j = 1; j <= b.length(); j++) {
                int exchanged = above[j - 1] + (a.charAt(i - 1) == b.charAt(j - 1) ? 0 : 1);
                row[j] = Math.min(exchanged, Math.min(above[j], row[j - 1]) + 1);
            }
            above = row;
        }
        return above[b.length()];
    }
}
