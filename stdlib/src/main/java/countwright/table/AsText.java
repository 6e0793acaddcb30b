package countwright.table;

import java.util.List;

/**
 * The columns of a file to take over as texts, as they are written, whatever they look like: identifiers such as 007 or a
 * number of twenty digits. Made by {@link Columns#asText}.
 */
public record AsText(List<String> columns) {

    static final AsText NONE = new AsText(List.of());

    public AsText {
        columns = List.copyOf(columns);
    }
}
