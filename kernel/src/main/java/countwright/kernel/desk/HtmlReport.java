package countwright.kernel.desk;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.Duration;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.util.List;
import java.util.Locale;

/**
 * A run notebook as one page of HTML that stands alone: no script, no request to anywhere, pictures inside.
 *
 * <p>It reads well in light and dark and prints. All text and markup of the notebook is escaped or sanitised.
 */
public final class HtmlReport {

    private static final DateTimeFormatter DATE =
            DateTimeFormatter.ofPattern("d MMMM uuuu, HH:mm 'UTC'", Locale.ENGLISH);

    private final Notebook notebook;
    private final RunRecord record;
    private final String fallbackTitle;
    private final Path folder;

    private HtmlReport(Notebook notebook, RunRecord record, String fallbackTitle, Path folder) {
        this.notebook = notebook;
        this.record = record;
        this.fallbackTitle = fallbackTitle;
        this.folder = folder;
    }

    /**
     * Returns the report of a notebook.
     *
     * @param fallbackTitle the title if the notebook has no heading
     * @param folder where pictures named in the text are looked for
     */
    public static HtmlReport of(Notebook notebook, RunRecord record, String fallbackTitle, Path folder) {
        return new HtmlReport(notebook, record, fallbackTitle, folder);
    }

    /**
     * Writes the page to a file; a reader never sees half of it.
     *
     * @throws DeskException if the file cannot be written
     */
    public void write(Path file) {
        Notebook.replaceFile(file, html());
    }

    /** Returns the page. */
    public String html() {
        MarkdownHtml markdown = new MarkdownHtml(folder);
        StringBuilder body = new StringBuilder();
        int number = 0;
        for (Cell cell : notebook.cells()) {
            if (cell instanceof Cell.Markdown text) {
                body.append("<section class=\"prose\">\n")
                        .append(markdown.render(text))
                        .append("</section>\n");
            } else if (cell instanceof Cell.Code code && !code.isBlank()) {
                number++;
                body.append(code(code, number));
            }
        }
        List<MarkdownHtml.Entry> headings = markdown.headings();
        String title = headings.isEmpty() ? fallbackTitle : headings.get(0).text();
        return """
                <!DOCTYPE html>
                <html lang="en">
                <head>
                <meta charset="utf-8">
                <meta name="viewport" content="width=device-width, initial-scale=1">
                <meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'unsafe-inline'; img-src data:">
                <meta name="color-scheme" content="light dark">
                <meta name="generator" content="Countwright %s">
                <title>%s</title>
                <style>
                %s</style>
                </head>
                <body>
                <div class="page%s">
                %s%s<main id="report">
                %s%s</main>
                %s</div>
                </body>
                </html>
                """.formatted(
                        SafeHtml.escape(record.productVersion()),
                        SafeHtml.escape(title),
                        style(),
                        contentsWorthwhile(headings) ? " has-contents" : "",
                        heading(body),
                        contents(headings),
                        stopped(),
                        body,
                        footer());
    }

    /** Takes a title at the very top out of the body, so that the list of contents can stand below it. */
    private static String heading(StringBuilder body) {
        String opening = "<section class=\"prose\">\n";
        int end = body.indexOf("</h1>");
        if (end < 0 || body.indexOf(opening + "<h1") != 0) {
            return "";
        }
        int afterTitle = end + "</h1>".length();
        String title = body.substring(opening.length(), afterTitle);
        body.delete(opening.length(), afterTitle);
        return "<header>\n" + title + "\n</header>\n";
    }

    private String code(Cell.Code cell, int number) {
        StringBuilder html = new StringBuilder();
        boolean stoppedHere = record.stoppedAt().filter(at -> at == number).isPresent();
        html.append("<section class=\"cell\"")
                .append(stoppedHere ? " id=\"stopped\"" : "")
                .append(">\n");
        html.append("<pre class=\"code\" data-count=\"")
                .append(
                        cell.executionCount().isPresent()
                                ? cell.executionCount().getAsInt()
                                : " ")
                .append("\"><code>")
                .append(JavaHighlighter.html(cell.source().stripTrailing()))
                .append("</code></pre>\n");
        cell.outputs().forEach(output -> html.append(OutputHtml.html(output)));
        return html.append("</section>\n").toString();
    }

    private static boolean contentsWorthwhile(List<MarkdownHtml.Entry> headings) {
        return listed(headings).size() >= 2;
    }

    /** The first heading is the title and would only repeat itself; deep levels make the list longer than the text. */
    private static List<MarkdownHtml.Entry> listed(List<MarkdownHtml.Entry> headings) {
        return headings.stream().skip(1).filter(heading -> heading.level() <= 3).toList();
    }

    private static String contents(List<MarkdownHtml.Entry> headings) {
        if (!contentsWorthwhile(headings)) {
            return "";
        }
        List<MarkdownHtml.Entry> listed = listed(headings);
        int top = listed.stream().mapToInt(MarkdownHtml.Entry::level).min().orElse(1);
        StringBuilder html =
                new StringBuilder("<nav id=\"contents\" aria-label=\"Contents\">\n<p>Contents</p>\n<ol>\n");
        for (MarkdownHtml.Entry entry : listed) {
            html.append("<li class=\"depth-%d\"><a href=\"#%s\">%s</a></li>\n"
                    .formatted(
                            Math.min(entry.level() - top, 2),
                            SafeHtml.escape(entry.id()),
                            SafeHtml.escape(entry.text())));
        }
        return html.append("</ol>\n</nav>\n").toString();
    }

    private String stopped() {
        return record.stoppedAt()
                .map(at -> ("<p class=\"notice\" role=\"note\"><strong>This run stopped at code cell %d.</strong> "
                                + "<a href=\"#stopped\">Its error</a> is shown below it; the cells after it were not"
                                + " run.</p>\n")
                        .formatted(at))
                .orElse("");
    }

    private String footer() {
        return """
                <footer id="run-record">
                <p>%s</p>
                <p>Countwright %s on Java %s. Run on %s, in %s.</p>
                </footer>
                """.formatted(
                        record.stoppedAt().isPresent()
                                ? "Code cells were run in order from the top, in a fresh session, until one failed."
                                : "Every code cell was run in order from the top, in a fresh session.",
                        SafeHtml.escape(record.productVersion()),
                        SafeHtml.escape(record.javaVersion()),
                        DATE.format(record.started().atOffset(ZoneOffset.UTC)),
                        seconds(record.duration()));
    }

    /** Returns a duration as a reader says it: "0.4 s", "12 s", "3 min 05 s". */
    static String seconds(Duration duration) {
        long millis = duration.toMillis();
        if (millis < 9_950) {
            return String.format(Locale.ROOT, "%.1f s", millis / 1000.0);
        }
        long seconds = (millis + 500) / 1000;
        return seconds < 60 ? seconds + " s" : String.format(Locale.ROOT, "%d min %02d s", seconds / 60, seconds % 60);
    }

    private static String style() {
        try (InputStream css = HtmlReport.class.getResourceAsStream("report.css")) {
            if (css == null) {
                throw new IllegalStateException("report.css is missing from the kernel's jar; build it again.");
            }
            return new String(css.readAllBytes(), StandardCharsets.UTF_8);
        } catch (IOException e) {
            throw new DeskException("the report's style sheet cannot be read: " + e.getMessage(), e);
        }
    }
}
