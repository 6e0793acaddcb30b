package countwright.kernel.desk;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.time.Instant;
import java.util.List;
import java.util.Optional;
import java.util.OptionalInt;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class HtmlReportTest {

    @TempDir
    private Path folder;

    @Nested
    class Hostile {

        @ParameterizedTest
        @ValueSource(
                strings = {
                    "<script>alert(1)</script>",
                    "<img src=x onerror=alert(1)>",
                    "<a href=\"javascript:alert(1)\">go</a>",
                    "<iframe src=\"https://example.org\"></iframe>",
                    "<img src=\"https://example.org/pixel.png\">",
                    "<svg onload=alert(1)></svg>",
                    "<div style=\"background:url(https://example.org/x.png)\">x</div>",
                    "<style>@import 'https://example.org/x.css'</style>",
                    "<link rel=stylesheet href=https://example.org/x.css>",
                    "<form action=https://example.org><input></form>",
                    "<a href=\"data:text/html;base64,PHNjcmlwdD4=\">go</a>"
                })
        void markup_inTextAndOutput_neitherRunsNorFetches(String markup) {
            String text = page(Notebooks.of(Notebooks.markdown("before\n\n" + markup + "\n\nafter")));
            String output = page(Notebooks.of(Notebooks.code("c", "x", Notebooks.shown("text/html", markup))));

            for (String page : List.of(text, output)) {
                assertThat(body(page))
                        .doesNotContainIgnoringCase("<script", "onerror", "onload", "javascript:", "<iframe", "<svg")
                        .doesNotContainIgnoringCase("url(", "@import", "<link", "<form", "<input", "data:text")
                        .doesNotContain("src=\"https:");
            }
            assertThat(text).contains("before", "after");
        }

        @Test
        void plainText_everywhere_isEscaped() {
            String nasty = "</pre><script>alert('x')</script>&";
            String page = page(Notebooks.of(Notebooks.code(
                    "c",
                    "String s = \"" + nasty + "\"; // " + nasty,
                    new Output.Text("stdout", nasty),
                    new Output.Text("stderr", nasty),
                    new Output.Failed(nasty, nasty, List.of(nasty)),
                    Notebooks.shown("text/other", "x"),
                    new Output.Shown(
                            OptionalInt.empty(),
                            Notebooks.object().put("image/png", "AAAA"),
                            metadata("image/png", "alt", "\"><script>")))));

            assertThat(page).doesNotContain("<script").contains("&lt;/pre&gt;&lt;script&gt;alert(&#39;x&#39;)");
        }

        @Test
        void heading_withMarkup_isEscapedInTitleAndContents() {
            String page = page(Notebooks.of(
                    Notebooks.markdown("# A `<b>` & \"more\"\n\n## One <script>x</script>\n\n## Two <i>i</i>")));

            assertThat(page)
                    .contains("<title>A &lt;b&gt; &amp; &quot;more&quot;</title>")
                    .doesNotContain("<script");
        }

        @Test
        void picture_thatIsNotBase64_isNotShown() {
            String page = page(Notebooks.of(
                    Notebooks.code("c", "x", Notebooks.shown("image/png", "\"><script>alert(1)</script>"))));

            assertThat(body(page)).doesNotContain("<script", "<img").contains("plain");
        }

        @Test
        void svg_standsAsAPictureSource() {
            String page = page(Notebooks.of(Notebooks.code(
                    "c", "x", Notebooks.shown("image/svg+xml", "<svg><script>alert(1)</script></svg>"))));

            assertThat(body(page)).doesNotContain("<script", "<svg").contains("src=\"data:image/svg+xml;base64,");
        }

        @Test
        void percentSigns_inText_standAsTheyAre() {
            assertThat(page(Notebooks.of(Notebooks.markdown("# 95% of %s and %n"))))
                    .contains("95% of %s and %n");
        }
    }

    @Nested
    class Kept {

        @Test
        void libraryTable_keepsItsInlineStyles() {
            String table =
                    "<div style=\"overflow-x:auto\"><table style=\"border-collapse:collapse\"><caption>c</caption>"
                            + "<tr><th scope=\"row\" style=\"text-align:left\">a &lt; b</th>"
                            + "<td style=\"text-align:right;border-bottom:1px solid rgba(128,128,128,0.2);opacity:0.8\">1.5</td>"
                            + "</tr></table></div>";
            String page = page(Notebooks.of(Notebooks.code("c", "x", Notebooks.shown("text/html", table))));

            assertThat(page)
                    .contains("overflow-x:auto", "border-collapse:collapse", "text-align:right", "opacity:0.8")
                    .contains("rgba( 128 , 128 , 128 , 0.2 )")
                    .contains("scope=\"row\"")
                    .contains("a &lt; b");
        }

        @Test
        void picture_hasSizeAndAlternative() {
            String page = page(Notebooks.of(Notebooks.code(
                    "c",
                    "x",
                    new Output.Shown(
                            OptionalInt.empty(),
                            Notebooks.object().put("image/png", "AAAA\nAAAA"),
                            metadata("image/png", "alt", "Rates rise")))));

            assertThat(page)
                    .contains("width=\"640\" height=\"400\" alt=\"Rates rise\" src=\"data:image/png;base64,AAAAAAAA\"");
        }

        @Test
        void pictureFile_inTheNotebooksFolder_isTakenIn() throws IOException {
            Files.write(folder.resolve("plan.png"), new byte[] {1, 2, 3});
            String page = page(Notebooks.of(Notebooks.markdown("![A plan](plan.png) ![Far](../secret.png)")));

            assertThat(body(page))
                    .contains("alt=\"A plan\"")
                    .contains("data:image/png;base64,AQID")
                    .doesNotContain("secret");
        }

        @Test
        void markdownTable_isATable() {
            assertThat(page(Notebooks.of(Notebooks.markdown("| a | b |\n|:--|--:|\n| 1 | 2 |"))))
                    .contains("<div class=\"wide\"><table>", "<td align=\"right\">2</td>");
        }

        @Test
        void link_leadsOut() {
            assertThat(page(Notebooks.of(Notebooks.markdown("[there](https://example.org/a?b=c)"))))
                    .contains("href=\"https://example.org/a?b&#61;c\"")
                    .contains("noopener");
        }
    }

    @Nested
    class Reading {

        @Test
        void title_isTheFirstHeading_andContentsListTheRest() {
            String page = page(Notebooks.of(Notebooks.markdown("# Doors\n\n## Rates\n\n### Deep\n\n## Rates")));

            assertThat(page)
                    .contains("<title>Doors</title>")
                    .contains("<header>\n<h1 id=\"doors\">Doors</h1>")
                    .contains("href=\"#rates\"", "href=\"#rates-2\"", "href=\"#deep\"")
                    .contains("<h2 id=\"rates-2\">");
        }

        @Test
        void noHeading_titleIsTheFileName() {
            assertThat(page(Notebooks.ofCode("x"))).contains("<title>tram-doors</title>");
        }

        @Test
        void terminalControls_areGone() {
            String page = page(Notebooks.of(Notebooks.code(
                    "c",
                    "x",
                    new Output.Text("stdout", "10%\r100%\n\u001B[1mbold\u001B[0m"),
                    new Output.Failed("E", "m", List.of("\u001B[31mred\u001B[0m")))));

            assertThat(page)
                    .contains(">100%\nbold</pre>")
                    .contains(">red</pre>")
                    .doesNotContain("\u001B");
        }

        @Test
        void record_tellsVersionsDateAndDuration_butNoPerson() {
            String page = page(Notebooks.ofCode("x"));

            assertThat(page)
                    .contains("Countwright 0.1.0 on Java 17.0.15. Run on 1 December 2026, 10:05 UTC, in 1 min 03 s.")
                    .doesNotContain(System.getProperty("user.dir"), folder.toString());
        }

        @Test
        void stoppedRun_saysWhereOnTopAndAtTheCell() {
            RunRecord stopped = new RunRecord("1", "17", Instant.EPOCH, Duration.ZERO, Optional.of(2));
            String page = HtmlReport.of(Notebooks.ofCode("a", "", "b"), stopped, "n", folder)
                    .html();

            assertThat(page).contains("stopped at code cell 2").containsOnlyOnce("id=\"stopped\"");
            assertThat(page.indexOf("id=\"stopped\"")).isGreaterThan(page.indexOf("<code>a</code>"));
        }

        @Test
        void code_isMarkedAndWhole() {
            String page = page(Notebooks.ofCode("var x = \"a\\\"b\"; // it's\nint y = 0x1F + 'c';"));

            assertThat(page)
                    .contains("<span class=\"jk\">var</span> x = <span class=\"js\">&quot;a\\&quot;b&quot;</span>;")
                    .contains("<span class=\"jc\">// it&#39;s</span>")
                    .contains("<span class=\"jn\">0x1F</span> + <span class=\"js\">&#39;c&#39;</span>;");
        }
    }

    private String page(Notebook notebook) {
        RunRecord record = new RunRecord(
                "0.1.0", "17.0.15", Instant.parse("2026-12-01T10:05:00Z"), Duration.ofSeconds(63), Optional.empty());
        return HtmlReport.of(notebook, record, "tram-doors", folder).html();
    }

    private static String body(String page) {
        return page.substring(page.indexOf("<body>"));
    }

    private static tools.jackson.databind.node.ObjectNode metadata(String type, String key, String value) {
        var metadata = Notebooks.object();
        metadata.putObject(type).put("width", 640).put("height", 400).put(key, value);
        return metadata;
    }
}
