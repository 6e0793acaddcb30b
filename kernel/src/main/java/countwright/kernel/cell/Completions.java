package countwright.kernel.cell;

import java.util.List;

/**
 * What could replace the text between two positions of the code.
 *
 * @param start first position replaced, in UTF-16 units
 * @param end position after the last one replaced
 * @param matches the candidates, best first
 */
public record Completions(int start, int end, List<Match> matches) {

    public Completions {
        matches = List.copyOf(matches);
    }

    /**
     * One candidate.
     *
     * @param text the text to put in
     * @param type what it is: "method", "variable", "class", "keyword", "column", ...
     */
    public record Match(String text, String type) {}
}
