package countwright.worker;

import org.jspecify.annotations.Nullable;

/**
 * The value of the expression with which a cell ends, on its way from the cell's code to the thread that shows it.
 *
 * <p>Public only because the code that the kernel makes of a cell calls it.
 */
public final class CellValue {

    private static @Nullable Object value;

    private CellValue() {}

    /** Hands over the value. */
    public static synchronized void set(@Nullable Object handedOver) {
        value = handedOver;
    }

    /** Returns the value and lets go of it; null if there is none. */
    static synchronized @Nullable Object take() {
        Object taken = value;
        value = null;
        return taken;
    }
}
