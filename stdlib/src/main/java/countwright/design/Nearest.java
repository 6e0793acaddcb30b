package countwright.design;

import java.util.List;
import java.util.Locale;

/** Finds the name that was probably meant, by the number of letters to change (V. I. Levenshtein, 1966). */
final class Nearest {

    private static final int LISTED = 20;

    private Nearest() {}

    /** Returns " Did you mean 'X'?" for the closest name if it is close, else nothing. */
    static String hint(String given, List<String> names) {
        String best = "";
        int bestDistance = Math.max(1, given.length() / 3) + 1;
        for (String name : names) {
            int distance = distance(given.toLowerCase(Locale.ROOT), name.toLowerCase(Locale.ROOT));
            if (distance < bestDistance) {
                best = name;
                bestDistance = distance;
            }
        }
        return best.isEmpty() ? "" : " Did you mean '" + best + "'?";
    }

    /** Returns the names for a message, cut where there are many. */
    static String list(List<String> names) {
        return names.size() <= LISTED
                ? String.join(", ", names)
                : String.join(", ", names.subList(0, LISTED)) + ", … (" + names.size() + " in all)";
    }

    private static int distance(String a, String b) {
        int[] previous = new int[b.length() + 1];
        int[] current = new int[b.length() + 1];
        for (int j = 0; j <= b.length(); j++) {
            previous[j] = j;
        }
        for (int i = 1; i <= a.length(); i++) {
            current[0] = i;
            for (int j = 1; j <= b.length(); j++) {
                int change = a.charAt(i - 1) == b.charAt(j - 1) ? 0 : 1;
                current[j] = Math.min(previous[j - 1] + change, 1 + Math.min(previous[j], current[j - 1]));
            }
            int[] swap = previous;
            previous = current;
            current = swap;
        }
        return previous[b.length()];
    }
}
