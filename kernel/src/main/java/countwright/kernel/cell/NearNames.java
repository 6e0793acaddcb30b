package countwright.kernel.cell;

import java.util.Collection;
import java.util.Locale;
import java.util.Optional;

/** Finds the name a misspelt one was probably meant to be. */
final class NearNames {

    private NearNames() {}

    /** Returns the candidate with the fewest typing errors, if they are few for the length of the name. */
    static Optional<String> nearest(String name, Collection<String> candidates) {
        int allowed = Math.max(1, name.length() / 3);
        String best = "";
        int fewest = Integer.MAX_VALUE;
        for (String candidate : candidates) {
            int errors = distance(name.toLowerCase(Locale.ROOT), candidate.toLowerCase(Locale.ROOT));
            if (errors < fewest) {
                fewest = errors;
                best = candidate;
            }
        }
        return fewest <= allowed ? Optional.of(best) : Optional.empty();
    }

    /** Insertions, deletions, substitutions and swaps of neighbours between two texts. */
    private static int distance(String a, String b) {
        int[][] table = new int[a.length() + 1][b.length() + 1];
        for (int i = 0; i <= a.length(); i++) {
            for (int k = 0; k <= b.length(); k++) {
                if (i == 0 || k == 0) {
                    table[i][k] = i + k;
                    continue;
                }
                int substitution = a.charAt(i - 1) == b.charAt(k - 1) ? 0 : 1;
                int value =
                        Math.min(Math.min(table[i - 1][k], table[i][k - 1]) + 1, table[i - 1][k - 1] + substitution);
                if (i > 1 && k > 1 && a.charAt(i - 1) == b.charAt(k - 2) && a.charAt(i - 2) == b.charAt(k - 1)) {
                    value = Math.min(value, table[i - 2][k - 2] + 1);
                }
                table[i][k] = value;
            }
        }
        return table[a.length()][b.length()];
    }
}
