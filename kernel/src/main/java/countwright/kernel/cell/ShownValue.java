package countwright.kernel.cell;

import countwright.worker.CellValue;
import java.util.Optional;
import java.util.regex.Pattern;

/**
 * Turns a last expression into a statement that hands its value to the worker.
 *
 * <p>JShell would make a variable of each bare expression: it works out the expression's type first, which takes as long
 * as compiling it, and keeps the value for ever. Handing the value over needs neither. What cannot be handed over in this
 * way, such as a call that returns nothing, does not compile; the expression is then evaluated as it stands.
 */
final class ShownValue {

    private static final String HAND_OVER = "{ " + CellValue.class.getName() + ".set(";

    /** As an argument, a switch takes its type from the parameter and not from its cases. */
    private static final Pattern SWITCH = Pattern.compile("\\bswitch\\b");

    /** With these a declaration or a statement begins: not worth a try. */
    private static final Pattern NO_EXPRESSION =
            Pattern.compile("(?:[@{]|(?:abstract|assert|boolean|break|byte|char|class"
                    + "|continue|do|double|enum|final|float|for|if|import|int|interface|long|private|protected|public|record|return"
                    + "|sealed|short|static|synchronized|throw|try|var|void|while)\\b)");

    private ShownValue() {}

    /** Returns the statement, which has the expression in its first line and all its lines in their order. */
    static Optional<String> statement(String expression) {
        boolean isOne = !NO_EXPRESSION.matcher(expression).lookingAt()
                && !SWITCH.matcher(expression).find()
                && CellSplitter.isBalanced(expression);
        // The line break ends a comment behind the expression.
        return isOne ? Optional.of(HAND_OVER + expression + "\n); }") : Optional.empty();
    }
}
