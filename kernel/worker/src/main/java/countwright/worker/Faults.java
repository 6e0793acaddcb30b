package countwright.worker;

import java.util.Arrays;
import java.util.IdentityHashMap;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.Optional;
import java.util.function.Supplier;
import jdk.jshell.spi.SPIResolutionException;
import org.jspecify.annotations.Nullable;

/**
 * Describes what user code threw. The methods of an exception can be user code as well: they may throw, give null or
 * never end, and none of that may cost the report that something was thrown.
 */
final class Faults {

    /** How many causes of an exception are reported. */
    static final int DEEPEST_CAUSE = 16;

    private static final int MOST_FRAMES = 400;
    private static final int LONGEST_MESSAGE = 100_000;

    private Faults() {}

    /** Must be called where a stop does no harm. */
    static Fault of(Throwable thrown) {
        if (thrown instanceof CellStop) {
            return new Fault.Stopped();
        }
        if (thrown instanceof SPIResolutionException unresolved) {
            return new Fault.Unresolved(unresolved.id(), framesOf(unresolved));
        }
        return thrown(thrown, new IdentityHashMap<>());
    }

    private static Fault.Thrown thrown(Throwable thrown, Map<Throwable, Boolean> seen) {
        seen.put(thrown, true);
        Optional<Throwable> cause =
                asked(thrown::getCause).filter(each -> !seen.containsKey(each) && seen.size() <= DEEPEST_CAUSE);
        return new Fault.Thrown(
                nameOf(thrown), messageOf(thrown), framesOf(thrown), cause.map(each -> thrown(each, seen)));
    }

    /** Returns the class that has a name: that of an anonymous class says nothing. */
    private static String nameOf(Throwable thrown) {
        Class<?> named = thrown.getClass();
        return named.isAnonymousClass() ? named.getSuperclass().getName() : named.getName();
    }

    private static Optional<String> messageOf(Throwable thrown) {
        try {
            return Optional.ofNullable(thrown.getLocalizedMessage()).map(Faults::cut);
        } catch (CellStop stop) {
            throw stop;
        } catch (Throwable e) {
            return Optional.of("(its message could not be read: getMessage threw "
                    + e.getClass().getName() + ")");
        }
    }

    private static String cut(String message) {
        int more = message.length() - LONGEST_MESSAGE;
        return more <= 0 ? message : message.substring(0, LONGEST_MESSAGE) + "… (" + more + " more characters)";
    }

    private static List<StackTraceElement> framesOf(Throwable thrown) {
        return asked(thrown::getStackTrace).stream()
                .flatMap(Arrays::stream)
                .filter(Objects::nonNull)
                .limit(MOST_FRAMES)
                .toList();
    }

    private static <T> Optional<T> asked(Supplier<@Nullable T> question) {
        try {
            return Optional.ofNullable(question.get());
        } catch (CellStop stop) {
            throw stop;
        } catch (Throwable e) {
            return Optional.empty();
        }
    }
}
