package countwright.kernel.wire;

import java.nio.charset.StandardCharsets;
import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Set;

/**
 * Remembers the signatures of recent messages, so that a recorded message sent again is refused. Bounded: the oldest
 * are forgotten first. Used by any thread.
 */
final class ReplayGuard {

    /** As many as the reference implementation keeps; about 13 MB at worst. */
    static final int STANDARD_CAPACITY = 65_536;

    private final Set<String> seen;

    ReplayGuard(int capacity) {
        this.seen = Collections.newSetFromMap(new LinkedHashMap<>() {
            private static final long serialVersionUID = 1L;

            @Override
            protected boolean removeEldestEntry(Map.Entry<String, Boolean> eldest) {
                return size() > capacity;
            }
        });
    }

    /** Says whether a signature is new, and remembers it. */
    synchronized boolean admits(byte[] signature) {
        return seen.add(new String(signature, StandardCharsets.ISO_8859_1));
    }
}
