package countwright.demo;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Base64;
import java.util.HashSet;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import tools.jackson.databind.JsonNode;

/** The demo notebook, run by the launcher as its reader would run it. */
@DisabledOnOs(value = OS.WINDOWS, disabledReason = "the launcher is a POSIX shell script")
class TramDoorsKernelTest {

    private static final long LIMIT_SECONDS = 240;

    @TempDir
    private static Path folder;

    private static ExecutedNotebook executed = ExecutedNotebook.none();

    @BeforeAll
    static void run() throws Exception {
        Path log = folder.resolve("log.txt");
        Process process = new ProcessBuilder(
                        Demo.distribution().resolve("bin/countwright").toString(),
                        "run",
                        Demo.notebooks().resolve("tram-doors.ipynb").toString(),
                        "--output",
                        folder.toString())
                .redirectErrorStream(true)
                .redirectOutput(log.toFile())
                .start();
        process.getOutputStream().close();
        boolean ended = process.waitFor(LIMIT_SECONDS, TimeUnit.SECONDS);
        process.destroy();

        assertThat(ended).as("the run ends in time").isTrue();
        assertThat(process.exitValue()).as(Files.readString(log)).isZero();
        executed = ExecutedNotebook.read(folder.resolve("tram-doors.ipynb"));
    }

    @Test
    void run_everyCell_isExecutedWithoutError() {
        assertThat(executed.codeCells()).hasSizeGreaterThanOrEqualTo(12);
        assertThat(executed.codeCells())
                .allSatisfy(cell -> assertThat(cell.path("execution_count").isIntegralNumber())
                        .isTrue());
        assertThat(executed.outputs())
                .extracting(output -> output.path("output_type").asString(""))
                .doesNotContain("error")
                .contains("stream", "execute_result");
    }

    @Test
    void run_charts_arePngPicturesWithTextAndSvg() {
        List<JsonNode> pictures = executed.outputs().stream()
                .map(output -> output.path("data"))
                .filter(data -> data.has("image/png"))
                .toList();

        assertThat(pictures).hasSizeGreaterThanOrEqualTo(4);
        assertThat(pictures).allSatisfy(data -> {
            byte[] png = Base64.getMimeDecoder().decode(data.path("image/png").asString(""));
            assertThat(png).startsWith(0x89, 'P', 'N', 'G').hasSizeGreaterThan(5_000);
            assertThat(data.has("image/svg+xml")).isTrue();
            assertThat(ExecutedNotebook.text(data.path("text/plain"))).isNotBlank();
        });
    }

    @Test
    void run_notebook_isOfFormat45WithIdsAndKernel() {
        JsonNode root = executed.root();
        Set<String> ids = new HashSet<>();

        assertThat(root.path("nbformat").asInt()).isEqualTo(4);
        assertThat(root.path("nbformat_minor").asInt()).isEqualTo(5);
        assertThat(root.path("metadata").path("kernelspec").path("name").asString(""))
                .isEqualTo("countwright");
        assertThat(root.path("cells").valueStream())
                .allSatisfy(cell -> assertThat(ids.add(cell.path("id").asString("")))
                        .as("id " + cell.path("id") + " is given once")
                        .isTrue());
        assertThat(ids).allSatisfy(id -> assertThat(id).matches("[a-zA-Z0-9_-]{1,64}"));
    }

    @Test
    void run_source_isCommittedWithoutOutputs() {
        ExecutedNotebook source = ExecutedNotebook.read(Demo.notebooks().resolve("tram-doors.ipynb"));

        assertThat(source.outputs()).isEmpty();
        assertThat(source.codeCells()).hasSameSizeAs(executed.codeCells());
    }

    @Test
    void run_report_holdsTextTablesAndPicturesInOneFile() throws IOException {
        String html = Files.readString(folder.resolve("tram-doors.html"));

        assertThat(html)
                .contains("The data are invented.", "rate ratio", "Door faults can hurt people", "data:image/")
                .doesNotContain("<script", "src=\"http", "href=\"http");
    }

    /** What the prose says of the data, held against what the cells have found. */
    @Nested
    class Prose {

        @Test
        void picture_namesTheGroupsAtEitherEnd() {
            assertThat(executed.shown("rates-depot")).contains("highest in Viaduct", "lowest in Hillside");
            assertThat(executed.shown("rates-door")).contains("highest in folding");
        }

        @Test
        void oddities_areSixMonthsInTheWorkshopAndOneDepotsLogger() {
            assertThat(executed.shown("standing")).contains("6 rows");
            assertThat(executed.shown("unrecorded"))
                    .contains("10 rows", "2023-10-01", "Orchard")
                    .doesNotContain("Harbour", "Hillside", "Viaduct");
        }

        @Test
        void firstModel_saysHillsideIsBetterAndWarns() {
            assertThat(lineOf("first", "depot Hillside vs Harbour")).contains("0.0002");
            assertThat(executed.shown("first"))
                    .contains("10 of 954 rows were left out")
                    .contains("vary more than a Poisson model allows")
                    .contains("rows that belong together");
        }

        @Test
        void excess_liesBetweenTrams() {
            double[] dispersions = executed.printed("within")
                    .lines()
                    .mapToDouble(line -> Double.parseDouble(line.replaceAll(".*: +", "")))
                    .toArray();

            assertThat(dispersions[0]).isGreaterThan(1.2);
            assertThat(dispersions[1]).isBetween(0.9, 1.1);
        }

        @Test
        void truth_isWhatTheGeneratorWasGiven() {
            Map.of(
                            "depot Hillside vs Harbour", DoorFaultLog.DEPOTS.get("Hillside"),
                            "depot Orchard vs Harbour", DoorFaultLog.DEPOTS.get("Orchard"),
                            "depot Viaduct vs Harbour", DoorFaultLog.DEPOTS.get("Viaduct"),
                            "doorType folding vs sliding", DoorFaultLog.DOOR_TYPES.get("folding"),
                            "doorType plug vs sliding", DoorFaultLog.DOOR_TYPES.get("plug"),
                            "age (per 1)", DoorFaultLog.AGE,
                            "temperature (per 1)", DoorFaultLog.TEMPERATURE)
                    .forEach((effect, ratio) ->
                            assertThat(lineOf("truth", effect)).contains(String.format(Locale.ROOT, " %.3f ", ratio)));
            assertThat(DoorFaultLog.DEPOTS).containsEntry("Harbour", 1.0);
            assertThat(DoorFaultLog.DOOR_TYPES).containsEntry("sliding", 1.0);
        }

        @Test
        void intervals_widenedHoldEveryTruthAndPoissonDoNot() {
            assertThat(lineOf("truth", "depot Hillside vs Harbour")).contains("misses it");
            assertThat(lineOf("truth", "temperature (per 1)")).contains("holds it");
            for (String effect : List.of("Hillside", "Orchard", "Viaduct", "folding", "plug", "age (per 1)")) {
                assertThat(lineOf("truth", effect)).endsWith("holds it");
            }
        }

        @Test
        void meaning_claimsColdAndAgeOnly() {
            assertThat(lineOf("interpretation", "ten degrees colder")).contains("more faults, beyond chance");
            assertThat(lineOf("interpretation", "ten years older")).contains("more faults, beyond chance");
            for (String effect : List.of("Hillside", "Orchard", "Viaduct", "folding", "plug")) {
                assertThat(lineOf("interpretation", effect)).contains("could be either way");
            }
        }

        private String lineOf(String cell, String start) {
            return executed.shown(cell)
                    .lines()
                    .filter(line -> line.contains(start))
                    .map(String::strip)
                    .findFirst()
                    .orElseThrow(() -> new AssertionError(
                            "no line with '" + start + "' in cell " + cell + ":\n" + executed.shown(cell)));
        }
    }
}
