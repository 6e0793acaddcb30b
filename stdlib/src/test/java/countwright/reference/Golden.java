package countwright.reference;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.util.List;
import java.util.Objects;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;

/** A golden file: the results of a model on published data, as computed in high precision. */
public final class Golden {

    private final JsonNode results;

    private Golden(JsonNode results) {
        this.results = results;
    }

    /** Returns the golden file of a case. */
    public static Golden of(String name) {
        String resource = "/reference/" + name + ".json";
        try (InputStream in = Objects.requireNonNull(Golden.class.getResourceAsStream(resource), resource)) {
            return new Golden(JsonMapper.shared().readTree(in).get("results"));
        } catch (IOException e) {
            throw new UncheckedIOException("cannot read " + resource, e);
        }
    }

    /** Returns whether the file has a result of a name. */
    public boolean has(String name) {
        return results.has(name);
    }

    /** Returns a number. */
    public double number(String name) {
        return results.required(name).asDouble();
    }

    /** Returns a vector. */
    public double[] vector(String name) {
        return vector(results.required(name));
    }

    /** Returns the names of the coefficients, as keys of the file. */
    public List<String> coefficientNames() {
        return results.required("coefficients")
                .valueStream()
                .map(node -> node.required("name").asString())
                .toList();
    }

    /** Returns a number of each coefficient: "estimate" or "se". */
    public double[] ofCoefficients(String field) {
        return ofEach("coefficients", field);
    }

    /** Returns a number of each element of a list. */
    public double[] ofEach(String list, String field) {
        return results.required(list)
                .valueStream()
                .mapToDouble(node -> node.required(field).asDouble())
                .toArray();
    }

    /** Returns an element of a matrix. */
    public double matrix(String name, int row, int column) {
        return results.required(name).required(row).required(column).asDouble();
    }

    private static double[] vector(JsonNode node) {
        return node.valueStream().mapToDouble(JsonNode::asDouble).toArray();
    }
}
