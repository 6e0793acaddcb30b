package countwright.show;

/**
 * How many cells of a fixed-width terminal a text takes: none for combining marks and other zero-width characters, two
 * for East Asian wide characters and pictographs, one for all others. The blocks follow Unicode Standard Annex 11.
 */
final class TextWidth {

    private TextWidth() {}

    static int of(String text) {
        return text.codePoints().map(TextWidth::of).sum();
    }

    private static int of(int codePoint) {
        int type = Character.getType(codePoint);
        if (type == Character.NON_SPACING_MARK
                || type == Character.ENCLOSING_MARK
                || type == Character.FORMAT
                || type == Character.CONTROL) {
            return 0;
        }
        return isWide(codePoint) ? 2 : 1;
    }

    private static boolean isWide(int c) {
        return c >= 0x1100
                && (c <= 0x115F
                        || (c >= 0x2E80 && c <= 0xA4CF && c != 0x303F)
                        || (c >= 0xA960 && c <= 0xA97C)
                        || (c >= 0xAC00 && c <= 0xD7A3)
                        || (c >= 0xF900 && c <= 0xFAFF)
                        || (c >= 0xFE30 && c <= 0xFE6F)
                        || (c >= 0xFF00 && c <= 0xFF60)
                        || (c >= 0xFFE0 && c <= 0xFFE6)
                        || (c >= 0x1F300 && c <= 0x1F64F)
                        || (c >= 0x1F680 && c <= 0x1F6FF)
                        || (c >= 0x1F900 && c <= 0x1FAFF)
                        || (c >= 0x20000 && c <= 0x3FFFD));
    }

    /** Returns the text cut, with an ellipsis, so that it takes at most some cells. */
    static String clipped(String text, int limit) {
        if (of(text) <= limit) {
            return text;
        }
        StringBuilder kept = new StringBuilder();
        int width = 0;
        int index = 0;
        while (index < text.length()) {
            int codePoint = text.codePointAt(index);
            int next = width + of(codePoint);
            if (next > limit - 1) {
                break;
            }
            kept.appendCodePoint(codePoint);
            width = next;
            index += Character.charCount(codePoint);
        }
        return kept.append('…').toString();
    }
}
