package countwright.table;

import java.util.Locale;
import java.util.Optional;

/** The kinds of file a table can be read from, told apart by the end of the name. */
enum FileFormat {
    CSV("\\.csv(\\.gz)?"),
    TSV("\\.(tsv|tab)(\\.gz)?"),
    PARQUET("\\.parquet"),
    JSON("\\.(json|jsonl|ndjson)(\\.gz)?");

    static final String ENDINGS = ".csv, .tsv, .parquet, .json, .jsonl or .ndjson (texts also packed, as .csv.gz)";

    private final String pattern;

    FileFormat(String ending) {
        this.pattern = ".*" + ending;
    }

    static Optional<FileFormat> of(String fileName) {
        String lower = fileName.toLowerCase(Locale.ROOT);
        for (FileFormat format : values()) {
            if (lower.matches(format.pattern)) {
                return Optional.of(format);
            }
        }
        return Optional.empty();
    }
}
