package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.desk.KernelCommand;
import countwright.kernel.desk.NotebookRun;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.Collectors;
import java.util.stream.IntStream;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;

/** Published data through kernel and worker: every number that a cell prints agrees with its reference value. */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class PublishedDataKernelTest {

    private static final double WANTED_DIGITS = 10;

    /** Equal doubles agree to more digits than they hold. */
    private static final double EQUAL = 17;

    /** Below this a value of the 60-digit arithmetic of the reference stands for an exact 0. */
    private static final double EXACT_ZERO = 1e-40;

    private static final List<String> SINGLE_NUMBERS =
            List.of("loglik", "deviance", "null_deviance", "df_residual", "pearson_chi2", "AIC", "BIC");
    private static final List<String> ROW_BY_ROW = List.of(
            "fitted",
            "hat",
            "residuals_pearson",
            "residuals_deviance",
            "residuals_std_pearson",
            "residuals_std_deviance",
            "cooks_distance");

    @TempDir
    private static Path folder;

    private static ExecutedNotebook executed = ExecutedNotebook.none();

    @BeforeAll
    static void run() {
        Path source = Demo.notebooks().resolve("src/test/resources/published-data.ipynb");
        Demo.Failures failures = new Demo.Failures();
        NotebookRun.Result result = NotebookRun.of(source, folder, KernelCommand.installedIn(Demo.distribution()))
                .run(failures);

        assertThat(failures.lines()).isEmpty();
        assertThat(result.stoppedAt()).isEmpty();
        executed = ExecutedNotebook.read(result.executed());
    }

    @ParameterizedTest
    @ValueSource(strings = {"ships_poisson", "biochemists_poisson", "insectsprays_poisson", "births_harmonic"})
    void fit_publishedData_agreesWithReferenceTo10Digits(String name) throws IOException {
        JsonNode golden = golden(name);
        Map<String, String> printed = printed(name);
        int[] order = order(golden, printed);

        Map<String, Double> digits = new LinkedHashMap<>();
        digits.put("estimates", least(ofCoefficients(golden, "estimate"), inOrder(printed, "estimate", order)));
        digits.put("standard errors", least(ofCoefficients(golden, "se"), inOrder(printed, "se", order)));
        digits.put("covariance", covariance(golden, printed, order));
        for (String single : SINGLE_NUMBERS) {
            digits.put(single, least(new double[] {golden.required(single).asDouble()}, numbers(printed, single)));
        }
        for (String vector : ROW_BY_ROW) {
            if (golden.has(vector)) {
                digits.put(vector, least(numbers(golden.required(vector)), numbers(printed, vector)));
            }
        }

        assertThat(digits)
                .allSatisfy((what, found) -> assertThat(found).as(what).isGreaterThanOrEqualTo(WANTED_DIGITS));
    }

    @ParameterizedTest
    @ValueSource(strings = {"ships_poisson", "insectsprays_poisson"})
    void reference_smallTables_holdsEveryRowByRowNumber(String name) throws IOException {
        assertThat(golden(name).propertyNames()).containsAll(ROW_BY_ROW);
    }

    @Test
    void fit_birthsByWeekday_givesTheObservedMeans() throws IOException {
        Map<String, String> printed = printed("births_weekday");
        List<String[]> rows;
        try (var lines = Files.lines(Demo.published().resolve("births.csv"))) {
            rows = lines.skip(1).map(line -> line.split(",", -1)).toList();
        }
        double[] observed = IntStream.rangeClosed(1, 7)
                .mapToDouble(day -> rows.stream()
                        .filter(row -> row[4].equals(Integer.toString(day)))
                        .mapToDouble(row -> Double.parseDouble(row[5]))
                        .average()
                        .orElseThrow())
                .toArray();

        assertThat(rows).hasSize(5479);
        assertThat(numbers(printed, "rows")).containsExactly(5479);
        assertThat(least(observed, numbers(printed, "means"))).isGreaterThanOrEqualTo(WANTED_DIGITS);
    }

    private static JsonNode golden(String name) throws IOException {
        return JsonMapper.shared()
                .readTree(Files.readString(Demo.published().resolve(name + ".json")))
                .required("results");
    }

    private static Map<String, String> printed(String cell) {
        return executed.printed(cell)
                .lines()
                .map(line -> line.split("=", 2))
                .collect(Collectors.toMap(pair -> pair[0], pair -> pair[1]));
    }

    private static String text(Map<String, String> printed, String what) {
        String text = printed.get(what);
        if (text == null) {
            throw new AssertionError("the cell printed no '" + what + "' but " + printed.keySet());
        }
        return text;
    }

    private static double[] numbers(Map<String, String> printed, String what) {
        return Arrays.stream(text(printed, what).split(" ", -1))
                .mapToDouble(Double::parseDouble)
                .toArray();
    }

    private static double[] numbers(JsonNode list) {
        return list.valueStream().mapToDouble(JsonNode::asDouble).toArray();
    }

    private static double[] ofCoefficients(JsonNode golden, String field) {
        return golden.required("coefficients")
                .valueStream()
                .mapToDouble(coefficient -> coefficient.required(field).asDouble())
                .toArray();
    }

    private static double[] inOrder(Map<String, String> printed, String what, int[] order) {
        double[] ours = numbers(printed, what);
        return Arrays.stream(order).mapToDouble(place -> ours[place]).toArray();
    }

    /** Returns, for each coefficient of the reference, its place among ours. */
    private static int[] order(JsonNode golden, Map<String, String> printed) {
        List<String> ours = List.of(text(printed, "names").split("\\|", -1));
        int[] order = golden.required("coefficients")
                .valueStream()
                .mapToInt(coefficient -> place(coefficient.required("name").asString(), ours))
                .toArray();
        assertThat(order).hasSize(ours.size()).doesNotHaveDuplicates();
        return order;
    }

    private static int place(String key, List<String> ours) {
        String start = switch (key) {
            case "(Intercept)" -> "baseline";
            case "year-2000" -> "sinceYear (";
            default -> key.endsWith("]") ? key.replace("[", " ").replace("]", " vs ") : key + " (";
        };
        List<String> found =
                ours.stream().filter(name -> name.startsWith(start)).toList();
        assertThat(found).as(key).hasSize(1);
        return ours.indexOf(found.get(0));
    }

    /** Elements that are 0 but for rounding are measured against the two standard errors. */
    private static double covariance(JsonNode golden, Map<String, String> printed, int[] order) {
        double[] ours = numbers(printed, "covariance");
        double[] errors = ofCoefficients(golden, "se");
        assertThat(ours).hasSize(order.length * order.length);
        double least = EQUAL;
        for (int i = 0; i < order.length; i++) {
            for (int j = 0; j < order.length; j++) {
                double expected =
                        golden.required("covariance").required(i).required(j).asDouble();
                double actual = ours[order[i] * order.length + order[j]];
                double scale = Math.abs(expected) < EXACT_ZERO ? errors[i] * errors[j] : 1;
                least = Math.min(least, digits(expected / scale, actual / scale));
            }
        }
        return least;
    }

    private static double least(double[] expected, double[] actual) {
        assertThat(actual).hasSameSizeAs(expected);
        return IntStream.range(0, expected.length)
                .mapToDouble(i -> digits(expected[i], actual[i]))
                .min()
                .orElseThrow();
    }

    /** Returns the significant digits to which two numbers agree; after the point where 0 is expected. */
    private static double digits(double expected, double actual) {
        if (expected == actual) {
            return EQUAL;
        }
        if (!Double.isFinite(actual)) {
            return 0;
        }
        double scale = Math.abs(expected) < EXACT_ZERO ? 1 : Math.abs(expected);
        return Math.min(EQUAL, -Math.log10(Math.abs(actual - expected) / scale));
    }
}
