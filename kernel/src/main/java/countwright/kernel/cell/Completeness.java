package countwright.kernel.cell;

/** Whether code can be run as it stands. */
public sealed interface Completeness {

    /** It can be run. */
    record Complete() implements Completeness {}

    /** More lines are needed; the next line would start with the given indent. */
    record Incomplete(String indent) implements Completeness {}

    /** No continuation can make it right. */
    record Invalid() implements Completeness {}
}
