package countwright.table;

import countwright.show.Numbers;
import java.sql.SQLException;
import java.util.Locale;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** Says in our words what the engine could not read, where, and what to do. */
final class ReadFailure {

    private static final Pattern LINE = Pattern.compile("CSV Error on Line: (\\d+)");
    private static final Pattern ORIGINAL = Pattern.compile("Original Line: (.*)");
    private static final Pattern FIELDS = Pattern.compile("Expected Number of Columns: (\\d+) Found: (\\d+)");
    private static final Pattern JSON = Pattern.compile("at byte \\d+ in (?:line|record/value) (\\d+): ([^.\\n]*)");

    private ReadFailure() {}

    static String message(TableFile file, SQLException failure) {
        String said = failure.getMessage() == null ? failure.toString() : failure.getMessage();
        return switch (file.format()) {
            case CSV, TSV -> text(file, said);
            case PARQUET -> parquet(file, said);
            case JSON -> json(file, said);
        };
    }

    private static String text(TableFile file, String said) {
        String line = group(LINE, 1, said);
        String where = (line.isEmpty() ? "" : "line " + line + " of ") + file.name();
        String original = group(ORIGINAL, 1, said);
        String quote = original.isBlank() ? "" : ": " + shortened(original);
        if (said.contains("not utf-8")) {
            return where + " is not written in UTF-8, so its letters cannot be told."
                    + " Open the file in an editor or spreadsheet and save it again with the encoding UTF-8.";
        }
        if (said.contains("unterminated quote")) {
            return where + " opens a quote (\") that is never closed" + quote
                    + ". Close it; a quote inside a quoted field is written twice.";
        }
        Matcher fields = FIELDS.matcher(said);
        if (fields.find()) {
            boolean more = Integer.parseInt(fields.group(2)) > Integer.parseInt(fields.group(1));
            return where + " has " + Numbers.count(Long.parseLong(fields.group(2)), "field")
                    + " where the header line has " + fields.group(1) + quote
                    + ". "
                    + (more
                            ? "If a field contains the separator, put the field in quotes (\"...\"); otherwise remove"
                                    + " what is too much."
                            : "Add what is missing; an unknown value is an empty field or NA.");
        }
        if (said.toLowerCase(Locale.ROOT).contains("maximum line size")) {
            return where + " is longer than 2 million characters, which is most often a quote (\") that is opened and"
                    + " never closed. Look for it at the start of that line.";
        }
        return where + " cannot be read: " + firstLine(said) + ". Correct the file there and read it again.";
    }

    private static String parquet(TableFile file, String said) {
        if (said.contains("magic bytes") || said.contains("too small")) {
            return file.name() + " (" + file.path() + ") is not a Parquet file, or only a part of one."
                    + " Write or copy it again; if it is text, give it the ending .csv or .tsv.";
        }
        return file.name() + " cannot be read as Parquet: " + firstLine(said) + ". Write or copy the file again.";
    }

    private static String json(TableFile file, String said) {
        Matcher place = JSON.matcher(said);
        if (place.find()) {
            return file.name() + " is not JSON near line " + place.group(1) + ": "
                    + place.group(2).strip() + ". The file holds one array of objects, or one object a line.";
        }
        return file.name() + " cannot be read as JSON: " + firstLine(said)
                + ". The file holds one array of objects, or one object a line.";
    }

    private static String firstLine(String said) {
        String first = said.lines().findFirst().orElse("").strip();
        String plain = first.replaceFirst("^[A-Z][A-Za-z ]* Error: ", "");
        return plain.endsWith(".") ? plain.substring(0, plain.length() - 1) : plain;
    }

    private static String shortened(String line) {
        return line.length() <= 80 ? line : line.substring(0, 79) + "…";
    }

    private static String group(Pattern pattern, int group, String text) {
        Matcher matcher = pattern.matcher(text);
        return matcher.find() ? matcher.group(group) : "";
    }
}
