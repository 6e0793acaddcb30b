package countwright.show;

import java.util.Base64;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Optional;

/**
 * One thing to show, in several forms of the same content, keyed by media type.
 *
 * <p>Text forms are stored as they are; {@code image/png} is stored as base64, the form in which the messaging protocol
 * and the notebook format carry it. Every bundle has {@code text/plain}: it is the text alternative of all others.
 * Immutable; a {@code with} method returns a new bundle. Metadata follows the notebook format: for each media type a
 * map of small values (numbers, text).
 */
public final class MimeBundle {

    public static final String TEXT = "text/plain";
    public static final String HTML = "text/html";
    public static final String PNG = "image/png";
    public static final String SVG = "image/svg+xml";

    private final Map<String, String> data;
    private final Map<String, Map<String, Object>> metadata;

    private MimeBundle(Map<String, String> data, Map<String, Map<String, Object>> metadata) {
        this.data = Collections.unmodifiableMap(data);
        this.metadata = Collections.unmodifiableMap(metadata);
    }

    /** Returns a bundle that shows as plain text. */
    public static MimeBundle text(String plainText) {
        Map<String, String> data = new LinkedHashMap<>();
        data.put(TEXT, plainText);
        return new MimeBundle(data, Map.of());
    }

    /**
     * Returns a bundle rebuilt from its parts, as received over a wire.
     *
     * @throws IllegalArgumentException if {@code text/plain} is missing
     */
    public static MimeBundle of(Map<String, String> data, Map<String, Map<String, Object>> metadata) {
        if (!data.containsKey(TEXT)) {
            throw new IllegalArgumentException("a bundle needs text/plain, but has only " + data.keySet());
        }
        Map<String, Map<String, Object>> metadataCopy = new LinkedHashMap<>();
        metadata.forEach((type, values) -> metadataCopy.put(type, Map.copyOf(values)));
        return new MimeBundle(new LinkedHashMap<>(data), metadataCopy);
    }

    /** Returns this bundle with an HTML form; the caller has escaped every piece of data in it. */
    public MimeBundle withHtml(String html) {
        return with(HTML, html, Map.of());
    }

    /**
     * Returns this bundle with a PNG picture.
     *
     * @param png the encoded picture
     * @param displayWidth width in CSS pixels at which it is meant to be seen (half its own width for a 2x picture)
     * @param displayHeight height in CSS pixels
     * @param alternative what the picture says, for readers who cannot see it
     */
    public MimeBundle withPng(byte[] png, int displayWidth, int displayHeight, String alternative) {
        return with(
                PNG,
                Base64.getEncoder().encodeToString(png),
                Map.of("width", displayWidth, "height", displayHeight, "alt", alternative));
    }

    /** Returns this bundle with an SVG picture and its text alternative. */
    public MimeBundle withSvg(String svg, String alternative) {
        return with(SVG, svg, Map.of("alt", alternative));
    }

    /** Returns this bundle with one more form, replacing a form of the same media type. */
    public MimeBundle with(String mediaType, String content, Map<String, Object> formMetadata) {
        Map<String, String> newData = new LinkedHashMap<>(data);
        newData.put(mediaType, content);
        Map<String, Map<String, Object>> newMetadata = new LinkedHashMap<>(metadata);
        if (formMetadata.isEmpty()) {
            newMetadata.remove(mediaType);
        } else {
            newMetadata.put(mediaType, Map.copyOf(formMetadata));
        }
        return new MimeBundle(newData, newMetadata);
    }

    /** Returns the plain-text form. */
    public String plainText() {
        return data.getOrDefault(TEXT, "");
    }

    /** Returns the form of a media type, if there is one. */
    public Optional<String> get(String mediaType) {
        return Optional.ofNullable(data.get(mediaType));
    }

    /** Returns all forms by media type, in the order they were added. */
    public Map<String, String> data() {
        return data;
    }

    /** Returns the metadata of each form that has any. */
    public Map<String, Map<String, Object>> metadata() {
        return metadata;
    }

    @Override
    public boolean equals(Object other) {
        return other instanceof MimeBundle that && data.equals(that.data) && metadata.equals(that.metadata);
    }

    @Override
    public int hashCode() {
        return 31 * data.hashCode() + metadata.hashCode();
    }

    @Override
    public String toString() {
        return plainText();
    }
}
