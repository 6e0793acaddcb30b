package countwright.show;

import java.awt.image.BufferedImage;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.util.Optional;
import javax.imageio.ImageIO;
import org.jspecify.annotations.Nullable;

/**
 * Turns any value into something to show. A {@link Displayable} shows itself; a picture becomes PNG; texts stand as they
 * are; arrays, collections, maps and records are written out, also inside each other; the rest is its own text. What is
 * very long is cut, with the count of what was left out. A value that fails to show itself is reported in its place.
 */
public final class Renderer {

    private static final int LONGEST_TEXT = 200_000;

    private Renderer() {}

    /** Returns what a value looks like; nothing for null. */
    public static Optional<MimeBundle> render(@Nullable Object value) {
        if (value == null) {
            return Optional.empty();
        }
        try {
            return Optional.of(rendered(value));
        } catch (Exception | StackOverflowError | LinkageError | AssertionError e) {
            // Other errors are left to pass: out of memory, and the one by which a host stops a cell.
            return Optional.of(MimeBundle.text(failure(value, e)));
        }
    }

    @SuppressWarnings("OptionalUsedAsFieldOrParameterType")
    private static MimeBundle rendered(Object value) {
        if (value instanceof Displayable displayable) {
            return checked(displayable);
        }
        if (value instanceof BufferedImage image) {
            return picture(image);
        }
        if (value instanceof Optional<?> optional && isPicture(optional.orElse(null))) {
            return rendered(optional.orElseThrow());
        }
        return MimeBundle.text(cut(value instanceof CharSequence text ? text.toString() : ValueText.of(value)));
    }

    private static boolean isPicture(@Nullable Object value) {
        return value instanceof Displayable || value instanceof BufferedImage;
    }

    @SuppressWarnings("ConstantValue")
    private static MimeBundle checked(Displayable displayable) {
        MimeBundle bundle = displayable.display();
        if (bundle == null) {
            throw new IllegalStateException("display() gave null instead of a bundle");
        }
        return bundle;
    }

    private static MimeBundle picture(BufferedImage image) {
        ByteArrayOutputStream png = new ByteArrayOutputStream();
        try {
            if (!ImageIO.write(image, "png", png)) {
                throw new IllegalStateException("a picture of this kind cannot be written as PNG; draw it into one of"
                        + " BufferedImage.TYPE_INT_ARGB");
            }
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
        String alternative = "picture, " + image.getWidth() + " × " + image.getHeight() + " pixels";
        return MimeBundle.text(alternative)
                .withPng(png.toByteArray(), image.getWidth(), image.getHeight(), alternative);
    }

    private static String cut(String text) {
        if (text.length() <= LONGEST_TEXT) {
            return text;
        }
        int end = Character.isHighSurrogate(text.charAt(LONGEST_TEXT - 1)) ? LONGEST_TEXT - 1 : LONGEST_TEXT;
        return text.substring(0, end) + "\n… " + Numbers.count(text.length() - (long) end, "more character");
    }

    private static String failure(Object value, Throwable thrown) {
        String method = value instanceof Displayable ? "display()" : "its text";
        String reason;
        try {
            reason = thrown instanceof StackOverflowError
                    ? "it went too deep; does the value contain itself?"
                    : String.valueOf(thrown);
        } catch (RuntimeException e) {
            reason = thrown.getClass().getName();
        }
        return "This value of class " + value.getClass().getTypeName() + " cannot be shown: " + method + " failed with "
                + reason;
    }
}
