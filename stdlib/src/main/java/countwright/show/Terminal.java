package countwright.show;

import java.io.BufferedReader;
import java.io.Console;
import java.io.IOException;
import java.io.InputStreamReader;
import java.nio.charset.Charset;
import org.jspecify.annotations.Nullable;

/** A stage without a host: text to standard output, lines from standard input. What is printed stays. */
final class Terminal implements Stage {

    private @Nullable BufferedReader lines;

    @Override
    public void display(MimeBundle bundle) {
        System.out.println(bundle.plainText());
    }

    @Override
    public void display(MimeBundle bundle, String displayId) {
        display(bundle);
    }

    @Override
    public void update(MimeBundle bundle, String displayId) {
        display(bundle);
    }

    @Override
    public void clear(Clearing when) {
        // A terminal keeps its lines.
    }

    @Override
    public void page(MimeBundle bundle) {
        display(bundle);
    }

    @Override
    public void nextInput(String code) {
        // A terminal has no cells.
    }

    @Override
    public void send(CommMessage message) {
        throw new IllegalStateException("there is no front end to send to: a comm needs a notebook at its other end.");
    }

    /** From JDK 22 on there is a console even where input is redirected; it then reads the line as any other. */
    @Override
    @SuppressWarnings("SystemConsoleNull")
    public synchronized String ask(String prompt, Echo echo) {
        Console console = System.console();
        if (echo == Echo.HIDDEN && console != null) {
            char[] typed = console.readPassword("%s ", prompt);
            if (typed != null) {
                return new String(typed);
            }
            throw endOfInput(prompt);
        }
        System.out.print(prompt + " ");
        System.out.flush();
        BufferedReader reader = lines;
        if (reader == null) {
            reader = new BufferedReader(new InputStreamReader(System.in, Charset.defaultCharset()));
            lines = reader;
        }
        try {
            String line = reader.readLine();
            if (line != null) {
                return line;
            }
        } catch (IOException e) {
            throw new IllegalStateException("cannot read an answer to '" + prompt + "': " + e.getMessage(), e);
        }
        throw endOfInput(prompt);
    }

    private static IllegalStateException endOfInput(String prompt) {
        return new IllegalStateException("there is no answer to '" + prompt
                + "': the input has ended. Run the cell where someone can type, or set the value in the cell.");
    }
}
