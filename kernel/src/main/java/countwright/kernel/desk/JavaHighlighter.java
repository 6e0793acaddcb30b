package countwright.kernel.desk;

import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** Marks comments, literals, annotations and keywords of Java source, and escapes everything for HTML. */
final class JavaHighlighter {

    private static final Pattern TOKEN = Pattern.compile("(?<comment>//[^\\n]*|/\\*(?s:.*?)(?:\\*/|\\z))"
            + "|(?<text>\"\"\"(?s:.*?)(?:\"\"\"|\\z)|\"(?:\\\\.|[^\"\\\\\\n])*\"?|'(?:\\\\.|[^'\\\\\\n])*'?)"
            + "|(?<number>\\b(?:0[xXbB][0-9a-fA-F_]+|\\d[\\d_]*(?:\\.[\\d_]+)?(?:[eE][+-]?\\d+)?)[dDfFlL]?\\b)"
            + "|(?<annotation>@[A-Za-z_][\\w.]*)"
            + "|(?<keyword>\\b(?:abstract|assert|boolean|break|byte|case|catch|char|class|continue|default|do"
            + "|double|else|enum|extends|false|final|finally|float|for|if|implements|import|instanceof|int"
            + "|interface|long|new|null|package|permits|private|protected|public|record|return|sealed|short"
            + "|static|super|switch|synchronized|this|throw|throws|transient|true|try|var|void|volatile|while"
            + "|yield)\\b)"
            + "|(?<word>[A-Za-z_$][\\w$]*)");

    private JavaHighlighter() {}

    static String html(String source) {
        StringBuilder html = new StringBuilder(source.length() * 2);
        Matcher token = TOKEN.matcher(source);
        int end = 0;
        while (token.find()) {
            html.append(SafeHtml.escape(source.substring(end, token.start())));
            String style = style(token);
            String text = SafeHtml.escape(token.group());
            if (style.isEmpty()) {
                html.append(text);
            } else {
                html.append("<span class=\"")
                        .append(style)
                        .append("\">")
                        .append(text)
                        .append("</span>");
            }
            end = token.end();
        }
        return html.append(SafeHtml.escape(source.substring(end))).toString();
    }

    private static String style(Matcher token) {
        if (token.group("comment") != null) {
            return "jc";
        } else if (token.group("text") != null) {
            return "js";
        } else if (token.group("number") != null) {
            return "jn";
        } else if (token.group("annotation") != null) {
            return "ja";
        } else if (token.group("keyword") != null) {
            return "jk";
        }
        return "";
    }
}
