package countwright.kernel.wire;

import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/**
 * The frames in front of a message: on shell, control and stdin the identity of the front end it came from or goes to,
 * on iopub the topic. Empty on the front end's side. Immutable; equal when all frames are.
 */
public final class Route {

    private static final Route EMPTY = new Route(List.of());

    private final List<byte[]> frames;

    private Route(List<byte[]> frames) {
        this.frames = frames;
    }

    /** Returns the route without frames. */
    public static Route none() {
        return EMPTY;
    }

    /** Returns a route of one frame, the topic in UTF-8. */
    public static Route topic(String topic) {
        return new Route(List.of(topic.getBytes(StandardCharsets.UTF_8)));
    }

    static Route of(List<byte[]> frames) {
        List<byte[]> copies = new ArrayList<>(frames.size());
        frames.forEach(frame -> copies.add(frame.clone()));
        return new Route(copies);
    }

    List<byte[]> frames() {
        return frames;
    }

    @Override
    public boolean equals(Object other) {
        return other instanceof Route that
                && Arrays.deepEquals(frames.toArray(new byte[0][]), that.frames.toArray(new byte[0][]));
    }

    @Override
    public int hashCode() {
        return Arrays.deepHashCode(frames.toArray(new byte[0][]));
    }

    @Override
    public String toString() {
        return "route of " + frames.size() + (frames.size() == 1 ? " frame" : " frames");
    }
}
