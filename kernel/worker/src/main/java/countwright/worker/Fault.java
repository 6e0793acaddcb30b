package countwright.worker;

import java.util.List;
import java.util.Optional;

/** Why a request failed, without the exception object, whose class the kernel may not know. */
public sealed interface Fault {

    /** User code threw. */
    record Thrown(String className, Optional<String> message, List<StackTraceElement> frames, Optional<Thrown> cause)
            implements Fault {
        public Thrown {
            frames = List.copyOf(frames);
        }
    }

    /** User code reached a declaration that still waits for something undeclared; {@code id} is JShell's number of it. */
    record Unresolved(int id, List<StackTraceElement> frames) implements Fault {
        public Unresolved {
            frames = List.copyOf(frames);
        }
    }

    /** User code was stopped by an interrupt. */
    record Stopped() implements Fault {}

    /** Classes could not be defined; {@code installed} tells for each whether it was. */
    record NotInstalled(String message, List<Boolean> installed) implements Fault {
        public NotInstalled {
            installed = List.copyOf(installed);
        }
    }

    /** Something of ours failed. */
    record Internal(String message) implements Fault {}
}
