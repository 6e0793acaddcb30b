package countwright.kernel.desk;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Base64;
import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import java.util.regex.Pattern;
import org.commonmark.ext.gfm.tables.TablesExtension;
import org.commonmark.node.AbstractVisitor;
import org.commonmark.node.Code;
import org.commonmark.node.Heading;
import org.commonmark.node.Image;
import org.commonmark.node.Node;
import org.commonmark.node.SoftLineBreak;
import org.commonmark.node.Text;
import org.commonmark.parser.Parser;
import org.commonmark.renderer.html.HtmlRenderer;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.ObjectNode;

/**
 * Turns the Markdown cells of one notebook into harmless HTML, and collects their headings on the way.
 *
 * <p>Pictures are taken into the page: those attached to a cell, and files in the notebook's folder or below. A picture
 * from anywhere else would be a request to there, so its text alternative stands in its place.
 */
final class MarkdownHtml {

    private static final long LARGEST_PICTURE_BYTES = 8L << 20;
    private static final Map<String, String> PICTURE_TYPES = Map.of(
            "png", "image/png",
            "jpg", "image/jpeg",
            "jpeg", "image/jpeg",
            "gif", "image/gif",
            "webp", "image/webp",
            "svg", "image/svg+xml");
    private static final Pattern NOT_IN_AN_ID = Pattern.compile("[^\\p{L}\\p{N}]+");

    private static final Parser PARSER =
            Parser.builder().extensions(List.of(TablesExtension.create())).build();

    private final Path folder;
    private final List<Entry> headings = new ArrayList<>();
    private final Set<String> idsUsed = new HashSet<>(Set.of("contents", "report", "run-record", "stopped"));

    /** Starts a notebook whose pictures are looked for in a folder. */
    MarkdownHtml(Path folder) {
        this.folder = folder;
    }

    /** A heading of the notebook. */
    record Entry(int level, String text, String id) {}

    /** Returns the headings met so far, in order. */
    List<Entry> headings() {
        return List.copyOf(headings);
    }

    String render(Cell.Markdown cell) {
        Node document = PARSER.parse(cell.source());
        Map<Node, String> ids = new HashMap<>();
        document.accept(new AbstractVisitor() {
            @Override
            public void visit(Heading heading) {
                String text = textOf(heading);
                String id = idFor(text);
                ids.put(heading, id);
                headings.add(new Entry(heading.getLevel(), text, id));
                visitChildren(heading);
            }

            @Override
            public void visit(Image image) {
                image.setDestination(
                        picture(image.getDestination(), cell.attachments()).orElse(""));
                visitChildren(image);
            }
        });
        HtmlRenderer renderer = HtmlRenderer.builder()
                .extensions(List.of(TablesExtension.create()))
                .attributeProviderFactory(context -> (node, tag, attributes) -> {
                    String id = ids.get(node);
                    if (id != null) {
                        attributes.put("id", id);
                    }
                })
                .build();
        // The sanitizer's output is well formed and escapes '<' everywhere else, so these are all the tables there are.
        return SafeHtml.ofMarkdown(renderer.render(document))
                .replace("<table", "<div class=\"wide\"><table")
                .replace("</table>", "</table></div>");
    }

    private String idFor(String text) {
        String words = NOT_IN_AN_ID.matcher(text.toLowerCase(Locale.ROOT)).replaceAll("-");
        words = words.replaceAll("^-+|-+$", "");
        String wanted = words.isEmpty() ? "section" : words;
        String id = wanted;
        for (int copy = 2; !idsUsed.add(id); copy++) {
            id = wanted + "-" + copy;
        }
        return id;
    }

    private static String textOf(Node node) {
        StringBuilder text = new StringBuilder();
        node.accept(new AbstractVisitor() {
            @Override
            public void visit(Text part) {
                text.append(part.getLiteral());
            }

            @Override
            public void visit(Code part) {
                text.append(part.getLiteral());
            }

            @Override
            public void visit(SoftLineBreak part) {
                text.append(' ');
            }
        });
        return text.toString().strip();
    }

    private Optional<String> picture(String destination, ObjectNode attachments) {
        if (destination.startsWith("attachment:")) {
            return attached(attachments.path(destination.substring("attachment:".length())));
        }
        if (SafeHtml.PICTURE_DATA.matcher(destination).matches()) {
            return Optional.of(destination);
        }
        return fromFile(destination);
    }

    private static Optional<String> attached(JsonNode forms) {
        for (String type : PICTURE_TYPES.values()) {
            if (forms.path(type).isString() && !type.equals("image/svg+xml")) {
                return Optional.of(
                        "data:" + type + ";base64," + forms.path(type).stringValue());
            }
        }
        return Optional.empty();
    }

    private Optional<String> fromFile(String destination) {
        String type = PICTURE_TYPES.get(
                destination.substring(destination.lastIndexOf('.') + 1).toLowerCase(Locale.ROOT));
        if (type == null || destination.contains(":")) {
            return Optional.empty();
        }
        try {
            Path home = folder.toRealPath();
            Path file = home.resolve(destination.replace("%20", " ")).toRealPath();
            if (!file.startsWith(home) || Files.size(file) > LARGEST_PICTURE_BYTES) {
                return Optional.empty();
            }
            return Optional.of(
                    "data:" + type + ";base64," + Base64.getEncoder().encodeToString(Files.readAllBytes(file)));
        } catch (IOException | InvalidPathException e) {
            return Optional.empty(); // The text alternative says what would be there.
        }
    }
}
