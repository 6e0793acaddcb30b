package countwright.show;

/** A value that knows how to show itself: as text for terminals and logs, richer where a front end can. */
@FunctionalInterface
public interface Displayable {

    /** Returns every form in which this value can be shown; always at least {@code text/plain}. */
    MimeBundle display();
}
