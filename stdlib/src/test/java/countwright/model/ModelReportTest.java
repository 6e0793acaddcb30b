package countwright.model;

import static countwright.design.Terms.levels;
import static org.assertj.core.api.Assertions.assertThat;

import countwright.reference.PublishedData;
import countwright.show.MimeBundle;
import countwright.show.RateUnit;
import countwright.table.NumberColumn;
import countwright.table.Table;
import countwright.table.TextColumn;
import java.util.Optional;
import org.junit.jupiter.api.Test;

class ModelReportTest {

    @Test
    void display_publishedModel_ratiosFirstThenFit() {
        String text = PublishedData.fit("ships_poisson").display().plainText();
        assertThat(text)
                .containsSubsequence(
                        "What drives the rate: incidents per service_months",
                        "type B vs A",
                        "0.58",
                        "0.41 to 0.82",
                        "0.002",
                        "baseline rate per 1,000 service_months",
                        "1.65",
                        "1.08 to 2.53",
                        "Baseline: type A, construction 1960-64, operation 1960-74.",
                        "How well it holds",
                        "events",
                        "356",
                        "deviance",
                        "38.70",
                        "Dispersion 1.7: the counts vary more than a Poisson model allows.");
    }

    @Test
    void display_levelNamesWithMarkup_areEscapedInHtml() {
        Table table = Table.of(NumberColumn.of("y", 1, 2, 3), TextColumn.of("g", "a", "<b>bold</b>", "a"));
        MimeBundle bundle = CountModel.of("y").on(levels("g")).fit(table).display();
        assertThat(bundle.plainText()).contains("<b>bold</b>");
        assertThat(bundle.get(MimeBundle.HTML))
                .hasValueSatisfying(
                        html -> assertThat(html).contains("&lt;b&gt;bold").doesNotContain("<b>bold"));
    }

    @Test
    void display_anotherLevel_saysWhich() {
        assertThat(PublishedData.fit("ships_poisson").at(0.9).toString())
                .contains("90% interval")
                .doesNotContain("95%");
    }

    @Test
    void coefficientTable_publishedModel_roundsByTheStandardError() {
        assertThat(PublishedData.fit("doctors_poisson").coefficientTable().toString())
                .containsSubsequence("agecat (per 1)", "2.38", "0.21", "agecat² (per 1)", "-0.198", "0.027");
    }

    @Test
    void covariance_published_showsItsVariances() {
        // Insect sprays: the variance of a log mean count is 1 / (sum of its counts), which is 174 for spray A.
        assertThat(PublishedData.fit("insectsprays_poisson").covariance().toString())
                .containsSubsequence("coefficient", "1 baseline", "0.005747", "2 spray B vs A");
    }

    @Test
    void rounded_estimateAndInterval_shareTheirDecimals() {
        assertThat(Rounded.of(0.5808, 0.103, 0.4101, 0.8226)).isEqualTo(new Rounded("0.58", "0.41 to 0.82"));
        assertThat(Rounded.of(1.0259, 0.00206, 1.0218, 1.0299)).isEqualTo(new Rounded("1.0259", "1.0218 to 1.0299"));
        assertThat(Rounded.of(0, Double.POSITIVE_INFINITY, 0, Double.POSITIVE_INFINITY))
                .isEqualTo(new Rounded("0", "0 to ∞"));
    }

    @Test
    void rounded_endNearOne_staysOnItsSide() {
        assertThat(Rounded.ofRatio(1.57, 0.366, 0.9957, 2.485)).isEqualTo(new Rounded("1.57", "0.996 to 2.485"));
        assertThat(Rounded.ofRatio(2, 0.35, 1.4, 2.8)).isEqualTo(new Rounded("2.00", "1.40 to 2.80"));
    }

    @Test
    void rounded_errorAboveTheEstimate_givesEachEndItsOwnDigits() {
        assertThat(Rounded.of(0.00005, 0.0007, 1e-9, 290_455_229))
                .isEqualTo(new Rounded("0.000050", "1.0e-9 to 290,455,229"));
    }

    @Test
    void display_exactFit_showsNoRoundingErrorAsDeviance() {
        Table table = Table.of(NumberColumn.of("y", 1, 5, 3), TextColumn.of("g", "a", "b", "c"));
        assertThat(CountModel.of("y").on(levels("g")).fit(table).toString()).doesNotContain("e-");
    }

    @Test
    void display_rateBelowATenth_hasTheUnitOfTheCharts() {
        assertThat(RateUnit.fitting(0.05, Optional.of("km")).suffix()).isEqualTo(" per 1,000 km");
    }
}
