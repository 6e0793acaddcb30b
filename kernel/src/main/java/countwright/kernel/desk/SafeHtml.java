package countwright.kernel.desk;

import java.util.List;
import java.util.regex.Pattern;
import org.owasp.html.AttributePolicy;
import org.owasp.html.CssSchema;
import org.owasp.html.HtmlPolicyBuilder;
import org.owasp.html.PolicyFactory;

/**
 * The markup a report lets through. Text of a notebook and whatever a cell shows may carry data from anywhere, so both
 * pass a sanitizer: no script, no style sheet, no request to anywhere; pictures only as data inside the page.
 */
final class SafeHtml {

    /** What a picture inside the page may be; the browser runs no script in a picture, SVG included. */
    static final Pattern PICTURE_DATA =
            Pattern.compile("data:image/(?:png|jpeg|gif|webp|svg\\+xml);base64,[A-Za-z0-9+/=\\s]*");

    private static final Pattern LINK = Pattern.compile("(?:https?://|mailto:|#).*", Pattern.CASE_INSENSITIVE);
    private static final Pattern HEADING_ID = Pattern.compile("[\\p{L}\\p{N}_-]+");

    private static final AttributePolicy PICTURE_ONLY =
            (element, attribute, value) -> PICTURE_DATA.matcher(value).matches() ? value : null;
    private static final AttributePolicy LINK_ONLY =
            (element, attribute, value) -> LINK.matcher(value.strip()).matches() ? value.strip() : null;

    private static final PolicyFactory MARKDOWN = common().allowAttributes("id")
            .matching(HEADING_ID)
            .onElements("h1", "h2", "h3", "h4", "h5", "h6")
            .allowAttributes("class")
            .matching(Pattern.compile("language-[\\w-]+"))
            .onElements("code")
            .toFactory();

    /** The same, and what tables and small bars drawn by a library need. */
    private static final PolicyFactory OUTPUT = common().allowAttributes("role", "aria-label", "aria-hidden")
            .globally()
            .allowStyling(CssSchema.union(
                    CssSchema.DEFAULT,
                    CssSchema.withProperties(List.of("display", "float", "opacity", "overflow", "overflow-x"))))
            .toFactory();

    private SafeHtml() {}

    /** Returns the harmless part of HTML made from a Markdown cell. */
    static String ofMarkdown(String html) {
        return MARKDOWN.sanitize(html);
    }

    /** Returns the harmless part of HTML that a cell has shown, its inline styles kept. */
    static String ofOutput(String html) {
        return OUTPUT.sanitize(html);
    }

    /** Returns text so that it stands for itself in HTML, also inside a quoted attribute. */
    static String escape(String text) {
        StringBuilder html = new StringBuilder(text.length() + 16);
        for (int i = 0; i < text.length(); i++) {
            char c = text.charAt(i);
            switch (c) {
                case '&' -> html.append("&amp;");
                case '<' -> html.append("&lt;");
                case '>' -> html.append("&gt;");
                case '"' -> html.append("&quot;");
                case '\'' -> html.append("&#39;");
                default -> html.append(c);
            }
        }
        return html.toString();
    }

    private static HtmlPolicyBuilder common() {
        return new HtmlPolicyBuilder()
                .allowElements(
                        "a",
                        "abbr",
                        "b",
                        "blockquote",
                        "br",
                        "caption",
                        "code",
                        "col",
                        "colgroup",
                        "dd",
                        "del",
                        "details",
                        "div",
                        "dl",
                        "dt",
                        "em",
                        "figcaption",
                        "figure",
                        "h1",
                        "h2",
                        "h3",
                        "h4",
                        "h5",
                        "h6",
                        "hr",
                        "i",
                        "img",
                        "kbd",
                        "li",
                        "mark",
                        "ol",
                        "p",
                        "pre",
                        "q",
                        "s",
                        "small",
                        "span",
                        "strong",
                        "sub",
                        "summary",
                        "sup",
                        "table",
                        "tbody",
                        "td",
                        "tfoot",
                        "th",
                        "thead",
                        "tr",
                        "u",
                        "ul",
                        "var")
                .allowWithoutAttributes("span")
                .allowAttributes("title", "lang", "dir")
                .globally()
                .allowAttributes("colspan", "rowspan", "align", "scope")
                .onElements("td", "th", "tr", "col", "colgroup")
                .allowAttributes("start")
                .onElements("ol")
                .allowAttributes("open")
                .onElements("details")
                .allowUrlProtocols("http", "https", "mailto", "data")
                .allowAttributes("href")
                .matching(LINK_ONLY)
                .onElements("a")
                .allowAttributes("src")
                .matching(PICTURE_ONLY)
                .onElements("img")
                .allowAttributes("alt", "width", "height")
                .onElements("img")
                .requireRelsOnLinks("noopener", "noreferrer");
    }
}
