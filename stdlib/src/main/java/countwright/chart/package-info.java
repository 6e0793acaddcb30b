/**
 * Figures for counts and rates: what was observed, what a model fits, and how far the two agree.
 *
 * <p>Read {@link countwright.chart.Charts} first: one factory for each figure. Each returns a {@link
 * countwright.chart.Chart}, which shows itself as PNG at twice its display size, as SVG, and as the numbers behind it in
 * plain text. The charting library that draws the plot appears in one signature only: {@link
 * countwright.chart.Chart#xchart()}.
 *
 * <p>Sources: exact interval of a rate, Garwood (1936), Biometrika 28, 437-442, doi:10.1093/biomet/28.3-4.437. Colours:
 * the palette for all kinds of colour vision of Okabe and Ito (2008), darkened so that each also differs in lightness.
 */
@NullMarked
package countwright.chart;

import org.jspecify.annotations.NullMarked;
