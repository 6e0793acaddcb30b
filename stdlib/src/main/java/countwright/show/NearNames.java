package countwright.show;

import java.util.ArrayList;
import java.util.Collection;
import java.util.Comparator;
import java.util.List;
import java.util.Locale;

/**
 * Names close to one that is unknown, for "did you mean".
 *
 * <p>Closeness is the number of letters to insert, delete, replace or swap with a neighbour (Damerau 1964), without regard
 * to case and to the separators '_', '-', '.' and space. A name is near if that takes at most a third of the letters of
 * the wanted name (at least one, unless the wanted name is a single letter), or if one name starts with the other.
 */
public final class NearNames {

    private static final int MOST = 3;
    private static final int LONGEST_LIST = 12;

    private NearNames() {}

    /** Returns at most three of the names, the nearest first; an empty list if none is near. */
    public static List<String> of(String wanted, Collection<String> names) {
        record Near(String name, int distance) {}
        String plainWanted = plain(wanted);
        // A single letter is near to every other; there only its case may be wrong.
        int limit = plainWanted.length() == 1 ? 0 : Math.max(1, plainWanted.length() / 3);
        List<Near> near = new ArrayList<>();
        for (String name : names) {
            String plainName = plain(name);
            int distance = distance(plainWanted, plainName);
            boolean begins = Math.min(plainWanted.length(), plainName.length()) >= 3
                    && (plainName.startsWith(plainWanted) || plainWanted.startsWith(plainName));
            if (distance <= limit || begins) {
                near.add(new Near(name, distance));
            }
        }
        near.sort(Comparator.comparingInt(Near::distance));
        return near.stream().limit(MOST).map(Near::name).toList();
    }

    /** Returns "Did you mean 'a' or 'b'?", or an empty text if no name is near. */
    public static String question(String wanted, Collection<String> names) {
        List<String> near =
                of(wanted, names).stream().map(name -> "'" + name + "'").toList();
        return near.isEmpty() ? "" : "Did you mean " + String.join(" or ", near) + "?";
    }

    /** Returns the names joined by commas; of a long list the first dozen and the count of the rest. */
    public static String list(Collection<String> names) {
        List<String> first = names.stream().limit(LONGEST_LIST).toList();
        int rest = names.size() - first.size();
        return String.join(", ", first) + (rest > 0 ? " and " + rest + " more" : "");
    }

    private static String plain(String name) {
        return name.toLowerCase(Locale.ROOT).replaceAll("[_\\-. ]", "");
    }

    /** Returns the restricted Damerau distance, in which no stretch of text is edited twice. */
    private static int distance(String a, String b) {
        int[][] cost = new int[a.length() + 1][b.length() + 1];
        for (int i = 0; i <= a.length(); i++) {
            for (int j = 0; j <= b.length(); j++) {
                cost[i][j] = i == 0 || j == 0 ? i + j : step(cost, a, b, i, j);
            }
        }
        return cost[a.length()][b.length()];
    }

    private static int step(int[][] cost, String a, String b, int i, int j) {
        int replaced = cost[i - 1][j - 1] + (a.charAt(i - 1) == b.charAt(j - 1) ? 0 : 1);
        int best = Math.min(replaced, 1 + Math.min(cost[i - 1][j], cost[i][j - 1]));
        boolean swapped = i > 1 && j > 1 && a.charAt(i - 1) == b.charAt(j - 2) && a.charAt(i - 2) == b.charAt(j - 1);
        return swapped ? Math.min(best, 1 + cost[i - 2][j - 2]) : best;
    }
}
