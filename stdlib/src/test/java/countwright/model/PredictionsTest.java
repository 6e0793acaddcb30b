package countwright.model;

import static countwright.reference.Digits.assertDigits;
import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import countwright.reference.Golden;
import countwright.reference.PublishedData;
import countwright.show.MimeBundle;
import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import org.junit.jupiter.api.Test;

class PredictionsTest {

    private final FittedModel model = PublishedData.fit("doctors_poisson");
    private final Table doctors = PublishedData.table("doctors");

    @Test
    void predict_fittedRows_agreesWithReferenceRates() {
        Golden golden = Golden.of("doctors_poisson");
        double[] rates = golden.ofEach("predicted_rates", "rate_per_10000");
        double[] lower = golden.ofEach("predicted_rates", "lower95_log_scale");
        double[] upper = golden.ofEach("predicted_rates", "upper95_log_scale");
        Predictions predictions = model.predict(doctors);
        assertThat(predictions.rows()).hasSize(10);
        for (Prediction prediction : predictions.rows()) {
            assertDigits(rates[prediction.row()], prediction.rate() * 1e4, 12);
            assertDigits(lower[prediction.row()], prediction.rateLower() * 1e4, 12);
            assertDigits(upper[prediction.row()], prediction.rateUpper() * 1e4, 12);
        }
    }

    @Test
    void predict_withExposure_multipliesTheRate() {
        Prediction prediction = model.predict(doctors).row(3);
        assertThat(prediction.exposure()).isEqualTo(2585);
        assertDigits(model.fittedMeans()[3], prediction.mean(), 13);
        assertDigits(prediction.rateUpper() * 2585, prediction.meanUpper(), 14);
    }

    @Test
    void predict_columnAlikeInAllRows_isSaidOnceBelow() {
        Table scenarios = Table.crossing(
                NumberColumn.of("agecat", 1, 2), TextColumn.of("smoker", "yes"), NumberColumn.of("person_years", 100));

        assertThat(model.predict(scenarios).toString())
                .contains("The same in every row: smoker yes, person_years 100.")
                .contains("agecat   expected deaths");
    }

    @Test
    void predict_withoutExposure_givesRatesAndSaysSo() {
        Predictions predictions =
                model.predict(Table.of(NumberColumn.of("agecat", 1, 2), TextColumn.of("smoker", "no", "yes")));
        assertThat(predictions.row(0).exposure()).isEqualTo(1);
        assertThat(predictions.notes()).anySatisfy(note -> assertThat(note).contains("no column 'person_years'"));
        assertThat(predictions.toString())
                .contains("rate per 1,000 person_years")
                .doesNotContain("expected deaths");
    }

    @Test
    void at_anotherLevel_changesTheIntervalsOnly() {
        Prediction usual = model.predict(doctors).row(0);
        Prediction narrower = model.predict(doctors).at(0.5).row(0);
        assertThat(narrower.rate()).isEqualTo(usual.rate());
        assertThat(narrower.rateUpper()).isLessThan(usual.rateUpper());
    }

    @Test
    void predict_columnOfATermMissing_namesIt() {
        Table renamed = Table.of(NumberColumn.of("agecat", 1), TextColumn.of("smokers", "no"));
        assertThatThrownBy(() -> model.predict(renamed))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("needs the column 'smoker'")
                .hasMessageContaining("Did you mean 'smokers'?");
    }

    @Test
    void predict_missingValue_namesRowAndColumn() {
        Table gap = Table.of(NumberColumn.of("agecat", 1, Double.NaN), TextColumn.of("smoker", "no", "yes"));
        assertThatThrownBy(() -> model.predict(gap))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("row 2 of column 'agecat' in table is missing");
    }

    @Test
    void predict_exposureOfZero_namesRowAndColumn() {
        Table zero = Table.of(
                NumberColumn.of("agecat", 1), TextColumn.of("smoker", "no"), NumberColumn.of("person_years", 0));
        assertThatThrownBy(() -> model.predict(zero))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("row 1 of column 'person_years' in table is 0");
    }

    @Test
    void display_predictions_hasTextAndHtml() {
        MimeBundle bundle = model.predict(doctors).display();
        assertThat(bundle.plainText()).contains("expected deaths", "95% interval", "Intervals are for the mean");
        assertThat(bundle.get(MimeBundle.HTML))
                .hasValueSatisfying(html -> assertThat(html).contains("expected deaths"));
    }

    @Test
    void predict_farBeyondWhatANumberHolds_isRefusedByRow() {
        assertThatThrownBy(() -> model.predict(
                        Table.of(NumberColumn.of("agecat", 1, 1e4), TextColumn.of("smoker", "no", "yes"))))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("row 2 of table is so far from the rows fitted")
                .hasMessageContaining("too small");
    }

    @Test
    void coefficient_nameOfTheColumnOnly_isHelped() {
        assertThatThrownBy(() -> model.coefficient("agecat"))
                .isInstanceOf(IllegalArgumentException.class)
                .hasMessageContaining("Did you mean 'agecat (per 1)'?");
    }
}
