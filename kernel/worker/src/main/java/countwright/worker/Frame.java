package countwright.worker;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.List;
import java.util.Optional;

/**
 * What crosses the stream between the kernel and the worker. Requests are answered once, in order; events come from the
 * worker at any time, and everything the worker sends keeps the order in which it was said.
 */
public sealed interface Frame {

    /** A frame the kernel sends. */
    sealed interface ToWorker extends Frame {}

    /** A frame the worker sends. */
    sealed interface ToKernel extends Frame {}

    /** Something said or done by user code, to be passed on to the front end. */
    sealed interface Event extends ToKernel {}

    /** A request that the cell thread carries out and answers with {@link Done} or {@link Failed}. */
    sealed interface Request extends ToWorker {}

    /** The answer to the oldest unanswered request. */
    sealed interface Reply extends ToKernel {}

    /** Defines classes. */
    record Load(List<CompiledClass> classes) implements Request {
        public Load {
            classes = List.copyOf(classes);
        }
    }

    /**
     * Defines classes, then runs a static method without parameters, and says whether its value is wanted as a bundle. Both
     * in one, because a cell is mostly both and each round trip costs it time.
     */
    record Invoke(List<CompiledClass> classes, String className, String methodName, Want want) implements Request {
        public Invoke {
            classes = List.copyOf(classes);
        }
    }

    /** Reads a static field as text. */
    record ReadVariable(String className, String variableName) implements Request {}

    /** Clears a static field, so that its value can be collected; a field that is not there is no matter. */
    record Release(String className, String variableName) implements Request {}

    /** Adds folders or archives to what user code can see. */
    record AddToClassPath(String path) implements Request {}

    /** Asks the cell thread to stop by {@link Thread#interrupt}. */
    record Interrupt() implements ToWorker {}

    /** Gives the line that was asked for. */
    record Answer(int question, String line) implements ToWorker {}

    /** Says that a question will not be answered, and why. */
    record Refuse(int question, String reason) implements ToWorker {}

    /** Gives a message from the front end's end of a comm; {@code number} names it in what comes of it. */
    record CommReceived(long number, CommMessage message) implements ToWorker {}

    /** Asks the handler of a comm message to stop by {@link Thread#interrupt}. */
    record InterruptHandler() implements ToWorker {}

    /** Ends the worker. */
    record Leave() implements ToWorker {}

    /** Says that the worker is connected; the token proves that it is the one the kernel started. */
    record Ready(String token, long processId) implements ToKernel {}

    /** A request was carried out. */
    record Done(String text, Optional<MimeBundle> value) implements Reply {}

    /** A request failed. */
    record Failed(Fault fault) implements Reply {}

    /** Bytes of UTF-8 text written to an output stream; a character may be split between two frames. */
    record Output(Channel channel, Bytes bytes) implements Event {}

    /** A bundle to show. */
    record Shown(MimeBundle bundle, Optional<String> displayId) implements Event {}

    /** A bundle that replaces an earlier one. */
    record Updated(MimeBundle bundle, String displayId) implements Event {}

    /** What was shown so far is to be removed. */
    record Cleared(Stage.Clearing when) implements Event {}

    /** A question for the person at the front end. */
    record Asked(int question, String prompt, Stage.Echo echo) implements Event {}

    /** A bundle for the front end's pager. */
    record Paged(MimeBundle bundle) implements Event {}

    /** Code for the front end's next cell. */
    record NextInput(String code) implements Event {}

    /** A message for the front end's end of a comm. */
    record CommSent(CommMessage message) implements Event {}

    /** An event caused not by a cell but by the handler of the comm message of that number. */
    record Aside(long number, Event event) implements ToKernel {}

    /** The handler of a comm message has ended, with a fault if it failed. */
    record Handled(long number, Optional<Fault> fault) implements ToKernel {}

    /** The two output streams of the worker. */
    enum Channel {
        OUT,
        ERR
    }

    /** Whether a value is wanted. */
    enum Want {
        NOTHING,
        BUNDLE
    }
}
