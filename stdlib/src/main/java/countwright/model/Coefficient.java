package countwright.model;

/**
 * A coefficient on the log scale.
 *
 * @param name what it belongs to, such as "baseline", "age (per 1)" or "depot Quayside vs Harbour"
 * @param estimate the maximum likelihood estimate
 * @param standardError its standard error, from the inverse of the Fisher information
 */
public record Coefficient(String name, double estimate, double standardError) {

    /** Returns the Wald statistic: the estimate divided by its standard error. */
    public double z() {
        return estimate / standardError;
    }
}
