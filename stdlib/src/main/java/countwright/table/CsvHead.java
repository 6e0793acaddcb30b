package countwright.table;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.zip.GZIPInputStream;

/**
 * What must be known of a CSV file before it is read: how many lines stand above the header line (blank ones, and remarks
 * that begin with '#') and what separates its fields: whichever of comma, semicolon, tab and '|' the header line has
 * most of outside quotes. The header line gives the names, trimmed; a blank one becomes "column" and its position.
 */
record CsvHead(int skippedLines, char separator, List<String> names) {

    CsvHead {
        names = List.copyOf(names);
    }

    private static final char[] SEPARATORS = {',', ';', '\t', '|'};
    private static final int LONGEST_HEADER = 1 << 20;

    /** Returns the head of a file; for an empty file there is no header line, which is an error. */
    static CsvHead of(TableFile file) throws IOException {
        try (BufferedReader lines = open(file.path())) {
            int skipped = 0;
            for (String line = lines.readLine(); line != null; line = lines.readLine()) {
                String content = line.startsWith("\uFEFF") ? line.substring(1) : line;
                if (!content.isBlank() && !content.startsWith("#")) {
                    char separator = file.format() == FileFormat.TSV ? '\t' : separator(content);
                    return new CsvHead(skipped, separator, names(content, separator, file, skipped + 1));
                }
                skipped++;
            }
        }
        throw new IllegalArgumentException("the file " + file.name() + " (" + file.path()
                + ") is empty. It needs at least a first line with the names of its columns.");
    }

    private static char separator(String header) {
        int[] counts = new int[SEPARATORS.length];
        boolean quoted = false;
        for (int i = 0; i < Math.min(header.length(), LONGEST_HEADER); i++) {
            char c = header.charAt(i);
            quoted = (c == '"') != quoted;
            for (int s = 0; s < SEPARATORS.length && !quoted; s++) {
                counts[s] += c == SEPARATORS[s] ? 1 : 0;
            }
        }
        int best = 0;
        for (int s = 1; s < SEPARATORS.length; s++) {
            best = counts[s] > counts[best] ? s : best;
        }
        return SEPARATORS[best];
    }

    private static List<String> names(String header, char separator, TableFile file, int line) {
        List<String> names = new ArrayList<>();
        for (String field : fields(header, separator, file, line)) {
            String name = field.strip();
            names.add(name.isEmpty() ? "column" + (names.size() + 1) : name);
        }
        for (int second = 1; second < names.size(); second++) {
            int first = names.indexOf(names.get(second));
            if (first < second) {
                throw new IllegalArgumentException(
                        "two columns of " + file.name() + " are called '" + names.get(second) + "': columns "
                                + (first + 1) + " and " + (second + 1) + " of the header line (line " + line
                                + "). Rename one of them in the file.");
            }
        }
        return names;
    }

    private static List<String> fields(String header, char separator, TableFile file, int line) {
        List<String> fields = new ArrayList<>();
        StringBuilder field = new StringBuilder();
        boolean quoted = false;
        for (int i = 0; i < header.length(); i++) {
            char c = header.charAt(i);
            if (c == '"' && quoted && i + 1 < header.length() && header.charAt(i + 1) == '"') {
                field.append('"');
                i++;
            } else if (c == '"') {
                quoted = !quoted;
            } else if (c == separator && !quoted) {
                fields.add(field.toString());
                field.setLength(0);
            } else {
                field.append(c);
            }
        }
        if (quoted) {
            throw new IllegalArgumentException("the header line of " + file.name() + " (line " + line
                    + ") opens a quote (\") that it does not close. Close it, or remove it.");
        }
        fields.add(field.toString());
        return fields;
    }

    private static BufferedReader open(Path path) throws IOException {
        InputStream bytes = Files.newInputStream(path);
        InputStream plain =
                path.toString().toLowerCase(Locale.ROOT).endsWith(".gz") ? new GZIPInputStream(bytes) : bytes;
        return new BufferedReader(new InputStreamReader(plain, StandardCharsets.UTF_8));
    }
}
