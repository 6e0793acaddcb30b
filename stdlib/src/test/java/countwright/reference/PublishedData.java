package countwright.reference;

import static countwright.design.Terms.interaction;
import static countwright.design.Terms.levels;
import static countwright.design.Terms.linear;

import countwright.model.CountModel;
import countwright.model.FittedModel;
import countwright.table.NumberColumn;
import countwright.table.Row;
import countwright.table.Table;
import java.net.URISyntaxException;
import java.nio.file.Path;
import java.util.Objects;
import java.util.function.ToDoubleFunction;

/** The published tables beside the tests, and the models that the golden files hold results of. */
public final class PublishedData {

    private PublishedData() {}

    /** Returns a published table. */
    public static Table table(String name) {
        try {
            return Table.read(
                    Path.of(Objects.requireNonNull(PublishedData.class.getResource("/reference/" + name + ".csv"), name)
                            .toURI()));
        } catch (URISyntaxException e) {
            throw new IllegalStateException("the tests lie at a place that is no file path", e);
        }
    }

    /** Returns the ships that were in service. */
    public static Table ships() {
        return table("ships").where(row -> row.number("service_months") > 0);
    }

    /** Returns the model of a golden file, fitted. */
    public static FittedModel fit(String goldenName) {
        return switch (goldenName) {
            case "ships_poisson" ->
                CountModel.of("incidents")
                        .exposure("service_months")
                        .on(levels("type"), levels("construction"), levels("operation"))
                        .fit(ships());
            case "biochemists_poisson" ->
                CountModel.of("art")
                        .on(
                                levels("fem"),
                                levels("mar").reference("Single"),
                                linear("kid5"),
                                linear("phd"),
                                linear("ment"))
                        .fit(table("biochemists"));
            case "insectsprays_poisson" ->
                CountModel.of("count").on(levels("spray")).fit(table("insectsprays"));
            case "doctors_poisson" ->
                CountModel.of("deaths")
                        .exposure("person_years")
                        .on(
                                linear("agecat"),
                                interaction(linear("agecat"), linear("agecat")),
                                levels("smoker"),
                                interaction(levels("smoker"), linear("agecat")))
                        .fit(table("doctors"));
            case "salmonella_poisson" ->
                CountModel.of("revertants")
                        .on(linear("dose"), linear("logDose"))
                        .fit(with(table("salmonella"), "logDose", row -> Math.log(row.number("dose") + 10)));
            case "horsekicks_constant" -> CountModel.of("deaths").fit(table("horsekicks"));
            case "horsekicks_corps_year" ->
                CountModel.of("deaths").on(levels("corps"), levels("year")).fit(table("horsekicks"));
            case "horsekicks_trend_cluster" ->
                CountModel.of("deaths")
                        .on(linear("t"), linear("tSquare"))
                        .fit(with(
                                with(table("horsekicks"), "t", row -> (row.number("year") - 1875) / 10),
                                "tSquare",
                                row -> Math.pow((row.number("year") - 1875) / 10, 2)));
            case "births_harmonic" ->
                CountModel.of("births")
                        .on(
                                levels("day_of_week"),
                                linear("sin1"),
                                linear("cos1"),
                                linear("sin2"),
                                linear("cos2"),
                                linear("sinceYear"))
                        .fit(births());
            case "seizures_poisson_cluster" ->
                CountModel.of("seizures")
                        .on(
                                linear("logBase"),
                                levels("treatment"),
                                interaction(levels("treatment"), linear("logBase")),
                                linear("logAge"),
                                linear("visit4"))
                        .fit(seizures());
            default -> throw new IllegalArgumentException("no model for " + goldenName);
        };
    }

    private static Table births() {
        Table births = table("births");
        births = with(births, "sin1", row -> StrictMath.sin(2 * Math.PI * row.index() / 365.25));
        births = with(births, "cos1", row -> StrictMath.cos(2 * Math.PI * row.index() / 365.25));
        births = with(births, "sin2", row -> StrictMath.sin(4 * Math.PI * row.index() / 365.25));
        births = with(births, "cos2", row -> StrictMath.cos(4 * Math.PI * row.index() / 365.25));
        return with(births, "sinceYear", row -> row.number("year") - 2000);
    }

    private static Table seizures() {
        Table seizures = with(table("seizures"), "logBase", row -> Math.log(row.number("base") / 4));
        seizures = with(seizures, "logAge", row -> Math.log(row.number("age")));
        return with(seizures, "visit4", row -> row.number("period") == 4 ? 1 : 0);
    }

    private static Table with(Table table, String name, ToDoubleFunction<Row> value) {
        double[] values = new double[table.rowCount()];
        for (int row = 0; row < values.length; row++) {
            values[row] = value.applyAsDouble(new Row(table, row));
        }
        return table.with(NumberColumn.of(name, values));
    }
}
