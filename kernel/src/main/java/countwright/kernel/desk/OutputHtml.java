package countwright.kernel.desk;

import java.nio.charset.StandardCharsets;
import java.util.Base64;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import tools.jackson.databind.JsonNode;

/**
 * One output of a cell as HTML: of the forms of a shown thing the richest that is safe in a page without script, that is
 * HTML, then a picture, then text.
 */
final class OutputHtml {

    private static final Pattern BASE64 = Pattern.compile("[A-Za-z0-9+/=\\s]+");
    private static final Pattern FIRST_ROW = Pattern.compile("<tr\\b.*?</tr>", Pattern.DOTALL);
    private static final Pattern ONE_CELL = Pattern.compile("<t[dh]\\b");
    private static final int MANY_COLUMNS = 9;
    private static final int VERY_MANY_COLUMNS = 14;

    private OutputHtml() {}

    static String html(Output output) {
        if (output instanceof Output.Text text) {
            return text(text);
        } else if (output instanceof Output.Failed failed) {
            return "<pre class=\"output failed\" role=\"alert\">" + SafeHtml.escape(String.join("\n", failed.lines()))
                    + "</pre>\n";
        } else if (output instanceof Output.Shown shown) {
            return shown(shown);
        }
        throw new IllegalStateException("an output of no known kind: " + output);
    }

    private static String text(Output.Text text) {
        String plain = TerminalText.plain(text.text()).stripTrailing();
        if (plain.isEmpty()) {
            return "";
        }
        String kind = text.stream().equals("stderr") ? "output stream warned" : "output stream";
        return "<pre class=\"" + kind + "\">" + SafeHtml.escape(plain) + "</pre>\n";
    }

    private static String shown(Output.Shown shown) {
        JsonNode html = shown.data().path("text/html");
        if (html.isString()) {
            String safe = SafeHtml.ofOutput(html.stringValue());
            return "<div class=\"output rich" + breadth(safe) + "\">" + safe + "</div>\n";
        }
        for (String type : new String[] {"image/png", "image/jpeg"}) {
            JsonNode picture = shown.data().path(type);
            if (picture.isString() && BASE64.matcher(picture.stringValue()).matches()) {
                return picture(type, picture.stringValue().replaceAll("\\s", ""), shown);
            }
        }
        JsonNode svg = shown.data().path("image/svg+xml");
        if (svg.isString()) {
            // As the source of an img element an SVG can neither run a script nor fetch anything.
            String data = Base64.getEncoder().encodeToString(svg.stringValue().getBytes(StandardCharsets.UTF_8));
            return picture("image/svg+xml", data, shown);
        }
        String plain =
                TerminalText.plain(shown.data().path("text/plain").asString("")).stripTrailing();
        return plain.isEmpty() ? "" : "<pre class=\"output value\">" + SafeHtml.escape(plain) + "</pre>\n";
    }

    private static String picture(String type, String base64, Output.Shown shown) {
        JsonNode about = shown.metadata().path(type);
        String alternative = about.path("alt").asString("");
        if (alternative.isBlank()) {
            alternative = shown.data().path("text/plain").asString("Chart");
        }
        StringBuilder img = new StringBuilder("<figure class=\"output picture\"><img");
        for (String side : new String[] {"width", "height"}) {
            if (about.path(side).isNumber() && about.path(side).intValue() > 0) {
                img.append(' ')
                        .append(side)
                        .append("=\"")
                        .append(about.path(side).intValue())
                        .append('"');
            }
        }
        return img.append(" alt=\"")
                .append(SafeHtml.escape(alternative))
                .append("\" src=\"data:")
                .append(type)
                .append(";base64,")
                .append(base64)
                .append("\"></figure>\n")
                .toString();
    }

    /** A page of paper does not scroll: a table of many columns is set smaller in print. */
    private static String breadth(String html) {
        Matcher row = FIRST_ROW.matcher(html);
        if (!row.find()) {
            return "";
        }
        long columns = ONE_CELL.matcher(row.group()).results().count();
        if (columns >= VERY_MANY_COLUMNS) {
            return " very-broad";
        }
        return columns >= MANY_COLUMNS ? " broad" : "";
    }
}
