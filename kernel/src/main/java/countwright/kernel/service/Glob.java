package countwright.kernel.service;

/**
 * A pattern in which a star stands for any text and a question mark for one character; all else stands for itself.
 *
 * <p>After a mismatch only the last star is tried further on, since whatever an earlier one could give, this one can as
 * well. So the time is at most the product of the two lengths, and a pattern of many stars does not blow up.
 */
final class Glob {

    private final int[] pattern;

    private Glob(int[] pattern) {
        this.pattern = pattern;
    }

    static Glob of(String pattern) {
        return new Glob(pattern.codePoints().toArray());
    }

    /** Returns whether the pattern stands for the whole of a text. */
    boolean matches(String text) {
        int[] characters = text.codePoints().toArray();
        int inPattern = 0;
        int inText = 0;
        int afterStar = -1;
        int starEnd = 0;
        while (inText < characters.length) {
            if (inPattern < pattern.length && pattern[inPattern] == '*') {
                inPattern++;
                afterStar = inPattern;
                starEnd = inText;
            } else if (inPattern < pattern.length
                    && (pattern[inPattern] == '?' || pattern[inPattern] == characters[inText])) {
                inPattern++;
                inText++;
            } else if (afterStar >= 0) {
                // The star takes one character more.
                starEnd++;
                inText = starEnd;
                inPattern = afterStar;
            } else {
                return false;
            }
        }
        while (inPattern < pattern.length && pattern[inPattern] == '*') {
            inPattern++;
        }
        return inPattern == pattern.length;
    }
}
