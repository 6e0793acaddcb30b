package countwright.table;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatCode;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import countwright.show.WarmUp;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.sql.Connection;
import java.sql.SQLException;
import java.sql.Statement;
import java.util.ServiceLoader;
import java.util.zip.GZIPOutputStream;
import org.assertj.core.api.ThrowableAssertAlternative;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class TableReadTest {

    @TempDir
    Path folder = Path.of("");

    private Path file(String name, String content) throws IOException {
        return Files.writeString(folder.resolve(name), content);
    }

    private Table csv(String content) throws IOException {
        return Table.read(file("faults.csv", content));
    }

    private ThrowableAssertAlternative<IllegalArgumentException> assertRefused(String name, String content)
            throws IOException {
        Path path = file(name, content);
        return assertThatIllegalArgumentException().isThrownBy(() -> Table.read(path));
    }

    @Nested
    class Csv {

        @Test
        void read_publishedBirths_hasItsRowsAndTypes() throws Exception {
            Path births = Path.of(
                    TableReadTest.class.getResource("/reference/births.csv").toURI());
            Table table = Table.read(births.toString());

            assertThat(table.source()).isEqualTo("births.csv");
            assertThat(table.rowCount()).isEqualTo(5_479);
            assertThat(table.column("date")).isInstanceOf(DateColumn.class);
            assertThat(table.column("date").text(5_478)).isEqualTo("2014-12-31");
            assertThat(table.numbers("births").value(0)).isEqualTo(9083);
        }

        @Test
        void read_everyKindOfColumn_keepsValuesAndMissing() throws IOException {
            Table table = csv("""
                    depot,age,when,at,code
                    Harbour,1.5,2024-02-29,2024-02-29 10:15,007
                    "Quay, ""old""\",-3e2,NA,2024-02-29T10:15:30.25,8
                    NA,,2024-03-01,,9
                    """);

            assertThat(table.columns().stream().map(Column::kind))
                    .containsExactly("text", "numbers", "dates", "date-times", "numbers");
            assertThat(table.column("depot").text(1)).isEqualTo("Quay, \"old\"");
            assertThat(table.numbers("age").toArray()).containsExactly(1.5, -300, Double.NaN);
            assertThat(table.column("when").text(0)).isEqualTo("2024-02-29");
            assertThat(table.column("at").text(1)).isEqualTo("2024-02-29T10:15:30.250");
            assertThat(table.columns().stream().map(Column::missingCount)).containsExactly(1, 1, 1, 1, 0);
        }

        @Test
        void read_typeDecidedByALateRow_isSeen() throws IOException {
            StringBuilder content = new StringBuilder("n\n");
            for (int row = 0; row < 30_000; row++) {
                content.append(row).append('\n');
            }
            Table table = csv(content.append("n/a\n").toString());

            assertThat(table.column("n")).isInstanceOf(TextColumn.class);
            assertThat(table.column("n").text(30_000)).isEqualTo("n/a");
            assertThat(table.column("n").text(29_999)).isEqualTo("29999");
        }

        @Test
        void read_rowsKeepTheOrderOfTheFile() throws IOException {
            StringBuilder content = new StringBuilder("n,name\n");
            for (int row = 0; row < 200_000; row++) {
                content.append(row).append(",name").append(row % 977).append('\n');
            }
            Table table = csv(content.toString());

            for (int row = 0; row < table.rowCount(); row++) {
                if (table.numbers("n").value(row) != row
                        || !table.column("name").text(row).equals("name" + row % 977)) {
                    throw new AssertionError("row " + row + " is out of order");
                }
            }
            assertThat(table.rowCount()).isEqualTo(200_000);
        }

        @Test
        void read_semicolonsAndDecimalCommas_giveTextAndAHint() throws IOException {
            Table table = csv("depot;rate\nHarbour;1,5\nQuay;2,25\n");

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> table.numbers("rate"))
                    .withMessageContainingAll("'rate'", "faults.csv", "row 1", "'1,5'", "decimal comma", "table.with(");
            Table remedied = table.with(
                    "rate", row -> Double.parseDouble(row.text("rate").replace(',', '.')));
            assertThat(remedied.numbers("rate").toArray()).containsExactly(1.5, 2.25);
        }

        @Test
        void read_dayFirstDates_areNotGuessed() throws IOException {
            assertThat(csv("d\n01/02/2024\n").column("d")).isInstanceOf(TextColumn.class);
        }

        @Test
        void read_headerOnly_givesNoRows() throws IOException {
            Table table = csv("depot,faults\n");

            assertThat(table.rowCount()).isZero();
            assertThat(table.columnNames()).containsExactly("depot", "faults");
        }

        @Test
        void read_marksRemarksAndBlankLinesAboveTheHeader_areSkipped() throws IOException {
            Table table = csv("\uFEFF# invented data\n\ndepot,faults\nHarbour,3\n");

            assertThat(table.columnNames()).containsExactly("depot", "faults");
            assertThat(table.numbers("faults").value(0)).isEqualTo(3);
        }

        @Test
        void read_byteOrderMark_isNotPartOfTheName() throws IOException {
            assertThat(csv("\uFEFFdepot,faults\nHarbour,3\n").columnNames()).containsExactly("depot", "faults");
        }

        @Test
        void read_blankName_getsItsPosition() throws IOException {
            assertThat(csv("a,, c \n1,2,3\n").columnNames()).containsExactly("a", "column2", "c");
        }

        @Test
        void read_namesThatDifferInCaseOnly_areTwoColumns() throws IOException {
            assertThat(csv("a,A\n1,2\n").numbers("A").value(0)).isEqualTo(2);
        }

        @Test
        void read_asText_keepsIdentifiersAsWritten() throws IOException {
            Path path = file("faults.csv", "vehicle,n\n007,1\n12345678901234567890,2\n");
            Table table = Table.read(path.toString(), Columns.asText("vehicle"));

            assertThat(((TextColumn) table.column("vehicle")).levels()).containsExactly("007", "12345678901234567890");
            assertThat(table.column("n")).isInstanceOf(NumberColumn.class);
            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Table.read(path.toString(), Columns.asText("vehicel")))
                    .withMessageContainingAll("'vehicel'", "faults.csv", "Did you mean 'vehicle'?");
        }

        @Test
        void read_packedAndTabbedFiles() throws IOException {
            Path packed = folder.resolve("packed.csv.gz");
            try (OutputStream out = new GZIPOutputStream(Files.newOutputStream(packed))) {
                out.write("a,b\n1,2\n".getBytes(StandardCharsets.UTF_8));
            }

            assertThat(Table.read(packed).numbers("b").value(0)).isEqualTo(2);
            assertThat(Table.read(file("tabs.tsv", "a\tb,c\n1\t2\n")).columnNames())
                    .containsExactly("a", "b,c");
        }

        @Test
        void read_nameWithWildcards_isTakenLiterally() throws IOException {
            file("f1.csv", "a\n2\n");

            assertThat(Table.read(file("f[1].csv", "a\n1\n")).numbers("a").toArray())
                    .containsExactly(1);
        }

        @Test
        void read_surrogateLevels_areSortedAsJavaSorts() throws IOException {
            TextColumn column = (TextColumn)
                    csv("a,b\n\uFF21,1\n\uD83D\uDE8A,2\n\uFF21,3\n").column("a");

            assertThat(column.levels()).isSorted();
            assertThat(column.text(1)).isEqualTo("\uD83D\uDE8A");
            assertThat(column.text(2)).isEqualTo("\uFF21");
        }
    }

    @Nested
    class Refusals {

        @Test
        void read_tooManyFields_namesLineCountsAndContent() throws IOException {
            assertRefused("faults.csv", "a,b\n1,2\n3,4,5\n")
                    .withMessageContainingAll("line 3 of faults.csv", "3 fields", "has 2", "3,4,5", "quotes");
        }

        @Test
        void read_tooFewFields_namesLineAndRemedy() throws IOException {
            assertRefused("faults.csv", "a,b\n1,2\n3\n")
                    .withMessageContainingAll("line 3 of faults.csv", "1 field where", "empty field or NA");
        }

        @Test
        void read_quoteNeverClosed_namesLine() throws IOException {
            assertRefused("faults.csv", "a,b\n1,\"x\n3,4\n")
                    .withMessageContainingAll("line 2 of faults.csv", "never closed");
            assertRefused("faults.csv", "a,\"b\n1,2\n").withMessageContainingAll("header line", "line 1", "quote");
        }

        @Test
        void read_otherEncoding_namesLineAndRemedy() throws IOException {
            Path path = folder.resolve("latin.csv");
            Files.write(path, "a\ncaf\u00e9\n".getBytes(StandardCharsets.ISO_8859_1));

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Table.read(path))
                    .withMessageContainingAll("line 2 of latin.csv", "UTF-8", "save it again");
        }

        @Test
        void read_emptyFile_saysSo() throws IOException {
            assertRefused("faults.csv", "").withMessageContainingAll("faults.csv", "is empty", "first line");
            assertRefused("faults.csv", "\n\n").withMessageContaining("is empty");
        }

        @Test
        void read_twoColumnsOfOneName_namesBothPositions() throws IOException {
            assertRefused("faults.csv", "km,age,km\n1,2,3\n")
                    .withMessageContainingAll("'km'", "columns 1 and 3", "line 1", "Rename");
        }

        @Test
        void read_integersTooLong_namesColumnRowAndValue() throws IOException {
            assertRefused("faults.csv", "id,n\n1,1\n9007199254740993,2\n")
                    .withMessageContainingAll("'id'", "faults.csv", "row 2", "9007199254740993", "asText(\"id\")");
            assertRefused("faults.csv", "id\n12345678901234567890123\n").withMessageContaining("row 1");
            assertRefused("faults.json", "[{\"id\": 9007199254740993}]").withMessageContaining("9007199254740993");
        }

        @Test
        void read_largeNumbersThatAreNotLongIntegers_areFine() throws IOException {
            assertThat(csv("x\n1e300\n9007199254740991\n").numbers("x").toArray())
                    .containsExactly(1e300, 9007199254740991.0);
        }

        @Test
        void read_missingFile_namesPathFolderAndNearNames() throws IOException {
            file("door-faults.csv", "a\n1\n");
            Path wanted = folder.resolve("door-fault.csv");

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Table.read(wanted.toString()))
                    .withMessageContainingAll(
                            "no file '" + wanted + "'",
                            "in " + folder.toAbsolutePath(),
                            "Did you mean 'door-faults.csv'?",
                            "working folder " + Path.of("").toAbsolutePath());
        }

        @Test
        void read_missingFileWithNothingNear_listsWhatIsThere() throws IOException {
            file("ships.csv", "a\n1\n");

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Table.read(folder.resolve("door-faults.csv")))
                    .withMessageContaining("holds ships.csv");
        }

        @Test
        void read_missingFolder_namesTheNearestThatIsThere() throws IOException {
            file("ships.csv", "a\n1\n");

            assertThatIllegalArgumentException()
                    .isThrownBy(() ->
                            Table.read(folder.resolve("data").resolve("deep").resolve("x.csv")))
                    .withMessageContainingAll("there is no folder", "The folder " + folder + " holds ships.csv");
        }

        @Test
        void read_folderUnknownKindWebAddressOrBlank_isRefusedWithRemedy() throws IOException {
            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Table.read(folder))
                    .withMessageContainingAll("is a folder", "Name one of its files");
            assertRefused("faults.xlsx", "x")
                    .withMessageContainingAll("faults.xlsx", ".csv, .tsv, .parquet", "Save the data");
            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Table.read("https://example.org/faults.csv"))
                    .withMessageContainingAll("https://example.org/faults.csv", "Download it first");
            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Table.read(" "))
                    .withMessageContaining("blank");
        }
    }

    @Nested
    class Typed {

        private Path parquet(String name, String query) throws SQLException {
            Path path = folder.resolve(name);
            try (Connection connection = Database.connect();
                    Statement statement = connection.createStatement()) {
                statement.execute("COPY (" + query + ") TO " + Sql.text(path.toString()) + " (FORMAT parquet)");
            }
            return path;
        }

        @Test
        void read_parquet_keepsItsTypes() throws SQLException {
            Table table = Table.read(parquet("all.parquet", """
                    SELECT * FROM (VALUES
                      (1::TINYINT, 2::UBIGINT, 1.25::DECIMAL(9,2), 0.1::FLOAT, true, DATE '2024-02-29',
                       TIMESTAMP '2024-02-29 10:15:00', 'b', TIMESTAMPTZ '2024-02-29 10:15:00+02'),
                      (NULL, NULL, NULL, NULL, NULL, NULL, NULL, NULL, NULL))
                    t(tiny, big, dec, flt, yes, d, ts, txt, tz)"""));

            assertThat(table.columns().stream().map(Column::kind))
                    .containsExactly(
                            "numbers",
                            "numbers",
                            "numbers",
                            "numbers",
                            "text",
                            "dates",
                            "date-times",
                            "text",
                            "date-times");
            assertThat(table.columns().stream().map(column -> column.text(0)))
                    .containsExactly(
                            "1",
                            "2",
                            "1.25",
                            "0.10000000149011612",
                            "true",
                            "2024-02-29",
                            "2024-02-29T10:15",
                            "b",
                            "2024-02-29T08:15");
            assertThat(table.columns().stream().map(Column::missingCount)).containsOnly(1);
        }

        @Test
        void read_parquetWithNestedColumn_namesColumnAndType() throws SQLException {
            Path path = parquet("nested.parquet", "SELECT 1 AS n, [1, 2] AS parts");

            assertThatIllegalArgumentException()
                    .isThrownBy(() -> Table.read(path))
                    .withMessageContainingAll("'parts'", "nested.parquet", "INTEGER[]", "Write the file again");
        }

        @Test
        void read_textNamedParquet_saysSo() throws IOException {
            assertRefused("text.parquet", "a,b\n1,2\n3,4\n5,6\n7,8\n")
                    .withMessageContainingAll("not a Parquet file", ".csv");
        }

        @Test
        void read_jsonArrayAndLines_giveTheSame() throws IOException {
            Path array = file("a.json", "[{\"depot\": \"Harbour\", \"n\": 1}, {\"depot\": null, \"n\": 2.5}]");
            Path lines = file("b.jsonl", "{\"depot\": \"Harbour\", \"n\": 1}\n{\"n\": 2.5}\n");

            for (Path path : new Path[] {array, lines}) {
                Table table = Table.read(path);
                assertThat(table.numbers("n").toArray()).containsExactly(1, 2.5);
                assertThat(table.column("depot").text(0)).isEqualTo("Harbour");
                assertThat(table.column("depot").isMissing(1)).isTrue();
            }
        }

        @Test
        void read_brokenJson_namesLineAndForm() throws IOException {
            assertRefused("broken.json", "{\"a\": 1}\n{\"a\":\n")
                    .withMessageContainingAll("broken.json", "line", "one object a line");
        }
    }

    @Test
    void warmUp_isFoundAsAServiceAndMayBeRepeated() {
        WarmUp warmUp = ServiceLoader.load(WarmUp.class).stream()
                .map(ServiceLoader.Provider::get)
                .filter(OpenDatabase.class::isInstance)
                .findFirst()
                .orElseThrow();

        assertThatCode(() -> {
                    warmUp.warmUp();
                    warmUp.warmUp();
                })
                .doesNotThrowAnyException();
    }
}
