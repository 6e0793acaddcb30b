package countwright.kernel.cell;

import java.util.regex.Pattern;

/** Gives names back the form in which the user wrote them: JShell puts each declaration into a class of its own. */
final class UserNames {

    private static final Pattern WRAPPER = Pattern.compile("REPL\\.\\$JShell\\$\\w+[.$]");

    private UserNames() {}

    static String of(String text) {
        return WRAPPER.matcher(text).replaceAll("");
    }
}
