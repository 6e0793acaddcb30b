package countwright.kernel.service;

/** Positions in code: the protocol counts Unicode code points, Java counts UTF-16 units. */
final class CodePoints {

    private CodePoints() {}

    /** Returns the position in UTF-16 units; beyond either end it is that end. */
    static int toUtf16(String code, int codePoints) {
        int known = Math.min(Math.max(codePoints, 0), code.codePointCount(0, code.length()));
        return code.offsetByCodePoints(0, known);
    }

    /** Returns the position in code points; beyond either end it is that end. */
    static int fromUtf16(String code, int units) {
        return code.codePointCount(0, Math.min(Math.max(units, 0), code.length()));
    }

    /** Returns where to cut a text so that the piece is at most so long, at least two, and no character is cut apart. */
    static int cut(String text, int start, int longest) {
        int end = Math.min(text.length(), start + longest);
        boolean apart = end < text.length() && Character.isSurrogatePair(text.charAt(end - 1), text.charAt(end));
        return apart ? end - 1 : end;
    }
}
