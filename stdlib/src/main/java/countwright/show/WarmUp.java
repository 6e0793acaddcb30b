package countwright.show;

/**
 * Work a library likes to do while a fresh session is still idle, such as loading a native part, so that the first cell
 * that needs it does not wait. Found with {@link java.util.ServiceLoader}; must be safe to skip and safe to repeat.
 */
public interface WarmUp {

    /** Does the work; anything it throws is ignored, since the real use will report it better. */
    void warmUp();
}
