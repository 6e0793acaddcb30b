package countwright.reference;

import static countwright.reference.Digits.agreement;
import static org.assertj.core.api.Assertions.assertThat;

import countwright.fit.Convergence;
import countwright.model.Coefficient;
import countwright.model.FittedModel;
import countwright.model.Residual;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.IntToDoubleFunction;
import java.util.stream.IntStream;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Every result of every plain Poisson model for which there are reference values, to 10 significant digits. */
class GoldenPoissonTest {

    private static final double WANTED = 10;

    /** Below this a value of the 60-digit arithmetic stands for an exact 0. */
    private static final double EXACT_ZERO = 1e-40;

    @ParameterizedTest
    @ValueSource(
            strings = {
                "ships_poisson",
                "biochemists_poisson",
                "insectsprays_poisson",
                "doctors_poisson",
                "salmonella_poisson",
                "horsekicks_constant",
                "horsekicks_corps_year",
                "horsekicks_trend_cluster",
                "births_harmonic",
                "seizures_poisson_cluster"
            })
    void fit_publishedData_agreesWithReferenceTo10Digits(String name) {
        FittedModel model = PublishedData.fit(name);

        Map<String, Double> digits = digits(Golden.of(name), model);

        assertThat(model.convergence()).isInstanceOf(Convergence.Converged.class);
        assertThat(digits).hasSizeGreaterThanOrEqualTo(9);
        assertThat(digits)
                .allSatisfy((what, found) -> assertThat(found).as(what).isGreaterThanOrEqualTo(WANTED));
    }

    private static Map<String, Double> digits(Golden golden, FittedModel model) {
        Map<String, Double> digits = new LinkedHashMap<>();
        int[] order = order(golden, model);
        List<Coefficient> coefficients = model.coefficients();
        double[] estimates = golden.ofCoefficients("estimate");
        double[] errors = golden.ofCoefficients("se");
        digits.put(
                "estimates",
                least(
                        order.length,
                        i -> near(estimates[i], coefficients.get(order[i]).estimate())));
        digits.put(
                "standard errors",
                least(
                        order.length,
                        i -> agreement(errors[i], coefficients.get(order[i]).standardError())));
        digits.put("covariance", covariance(golden, model, order, errors));
        digits.put("log-likelihood", agreement(golden.number("loglik"), model.logLikelihood()));
        digits.put("deviance", agreement(golden.number("deviance"), model.deviance()));
        digits.put("null deviance", agreement(golden.number("null_deviance"), model.nullDeviance()));
        digits.put("Pearson", agreement(golden.number("pearson_chi2"), model.pearsonChiSquare()));
        digits.put("AIC", agreement(golden.number("AIC"), model.aic()));
        digits.put("BIC", agreement(golden.number("BIC"), model.bic()));
        digits.put("degrees of freedom", agreement(golden.number("df_residual"), model.residualDegreesOfFreedom()));
        putVector(digits, golden, "fitted", model.fittedMeans());
        putVector(digits, golden, "hat", model.leverage());
        putVector(digits, golden, "residuals_pearson", model.residuals(Residual.PEARSON));
        putVector(digits, golden, "residuals_deviance", model.residuals(Residual.DEVIANCE));
        putVector(digits, golden, "residuals_std_pearson", model.residuals(Residual.STANDARDISED_PEARSON));
        putVector(digits, golden, "residuals_std_deviance", model.residuals(Residual.STANDARDISED_DEVIANCE));
        putVector(digits, golden, "cooks_distance", model.cooksDistance());
        putStart(digits, golden, "first_7_fitted", model.fittedMeans());
        putStart(digits, golden, "first_7_std_pearson", model.residuals(Residual.STANDARDISED_PEARSON));
        if (golden.has("hat_sum")) {
            double[] leverage = model.leverage();
            digits.put(
                    "hat sum",
                    agreement(
                            golden.number("hat_sum"),
                            IntStream.range(0, leverage.length)
                                    .mapToDouble(i -> leverage[i])
                                    .sum()));
            digits.put(
                    "largest hat",
                    agreement(
                            golden.number("max_hat"),
                            IntStream.range(0, leverage.length)
                                    .mapToDouble(i -> leverage[i])
                                    .max()
                                    .orElseThrow()));
        }
        return digits;
    }

    /** Off-diagonal elements that are 0 but for rounding are measured against the two standard errors. */
    private static double covariance(Golden golden, FittedModel model, int[] order, double[] errors) {
        double least = Digits.EXACT;
        for (int i = 0; i < order.length; i++) {
            for (int j = 0; j < order.length; j++) {
                double expected = golden.matrix("covariance", i, j);
                double actual = model.covariance().get(order[i], order[j]);
                boolean zero = Math.abs(expected) < EXACT_ZERO;
                double found = zero ? agreement(0, actual / (errors[i] * errors[j])) : agreement(expected, actual);
                least = Math.min(least, found);
            }
        }
        return least;
    }

    private static void putVector(Map<String, Double> digits, Golden golden, String name, double[] actual) {
        if (golden.has(name)) {
            assertThat(actual).as(name).hasSameSizeAs(golden.vector(name));
            putStart(digits, golden, name, actual);
        }
    }

    private static void putStart(Map<String, Double> digits, Golden golden, String name, double[] actual) {
        if (golden.has(name)) {
            double[] expected = golden.vector(name);
            digits.put(name, least(expected.length, i -> near(expected[i], actual[i])));
        }
    }

    private static double near(double expected, double actual) {
        return agreement(Math.abs(expected) < EXACT_ZERO ? 0 : expected, actual);
    }

    private static double least(int size, IntToDoubleFunction digits) {
        return IntStream.range(0, size).mapToDouble(digits).min().orElseThrow();
    }

    /** Returns, for each coefficient of the golden file, its place among ours. */
    private static int[] order(Golden golden, FittedModel model) {
        List<String> ours = model.coefficients().stream().map(Coefficient::name).toList();
        assertThat(ours).hasSameSizeAs(golden.coefficientNames());
        return golden.coefficientNames().stream()
                .mapToInt(key -> place(key, ours))
                .toArray();
    }

    private static int place(String key, List<String> ours) {
        String start = switch (key) {
            case "(Intercept)" -> "baseline";
            case "agecat^2" -> "agecat² (";
            case "smoker[yes]:agecat" -> "smoker yes vs no × agecat";
            case "treatment[progabide]:log(base/4)" -> "treatment progabide vs placebo × logBase";
            case "log(base/4)" -> "logBase (";
            case "log(age)" -> "logAge (";
            case "log(dose+10)" -> "logDose (";
            case "t^2" -> "tSquare (";
            case "year-2000" -> "sinceYear (";
            default -> key.endsWith("]") ? key.replace("[", " ").replace("]", " vs ") : key + " (";
        };
        List<String> found =
                ours.stream().filter(name -> name.startsWith(start)).toList();
        // A main effect is the start of its interactions' names, and stands before them.
        assertThat(found).as(key).isNotEmpty();
        return ours.indexOf(found.get(0));
    }
}
