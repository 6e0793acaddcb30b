package countwright.kernel.desk;

/** A few words by which a person knows a cell again: its first comment, or else its first line of code. */
final class CellLabel {

    private CellLabel() {}

    static String of(String source) {
        String fallback = "";
        for (String line : source.lines().map(String::strip).toList()) {
            String words = line.startsWith("//") || line.startsWith("/*") || line.startsWith("*")
                    ? line.replaceAll("^(?:/+\\**|\\*+/?)|\\*+/$", "").strip()
                    : line;
            if (words.isEmpty()) {
                continue;
            }
            if (!line.startsWith("import ")) {
                return TerminalText.plain(words);
            }
            fallback = fallback.isEmpty() ? words : fallback;
        }
        return TerminalText.plain(fallback);
    }
}
