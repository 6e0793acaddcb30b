package countwright.worker;

import java.util.Arrays;

/** An immutable sequence of bytes. */
public final class Bytes {

    private final byte[] content;

    private Bytes(byte[] content) {
        this.content = content;
    }

    /** Returns a copy of the given bytes. */
    public static Bytes of(byte[] content) {
        return new Bytes(content.clone());
    }

    /** Keeps the array it is given, which nobody may touch again. */
    static Bytes keeping(byte[] content) {
        return new Bytes(content);
    }

    /** Returns the number of bytes. */
    public int size() {
        return content.length;
    }

    /** Returns a copy of the bytes. */
    public byte[] toArray() {
        return content.clone();
    }

    @Override
    public boolean equals(Object other) {
        return other instanceof Bytes that && Arrays.equals(content, that.content);
    }

    @Override
    public int hashCode() {
        return Arrays.hashCode(content);
    }

    @Override
    public String toString() {
        return content.length + " bytes";
    }
}
