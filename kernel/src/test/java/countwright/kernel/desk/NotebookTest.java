package countwright.kernel.desk;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.nio.file.Path;
import java.util.List;
import java.util.OptionalInt;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class NotebookTest {

    private static final String OF_FORMAT_4_0 = """
            {"nbformat": 4, "nbformat_minor": 0, "metadata": {"kernelspec": {"name": "x"}, "own": [1, 2.5]},
             "cells": [
              {"cell_type": "markdown", "metadata": {}, "source": ["# Title\\n", "text"]},
              {"cell_type": "code", "metadata": {"tags": ["raises-exception"]}, "source": "a();\\nb()",
               "execution_count": 3, "prompt_number": 3, "outputs": [
                {"output_type": "stream", "name": "stderr", "text": ["one\\n", "two"]},
                {"output_type": "execute_result", "execution_count": 3, "metadata": {},
                 "data": {"text/plain": ["1\\n", "2"], "application/json": {"deep": [null]}}},
                {"output_type": "display_data", "metadata": {"image/png": {"width": 5}}, "data": {"image/png": "AAAA"}},
                {"output_type": "from the future", "x": 1},
                {"output_type": "error", "ename": "E", "evalue": "v", "traceback": ["l1", "l2"]}]},
              {"cell_type": "raw", "id": "bad id!", "metadata": {}, "source": []},
              {"cell_type": "code", "id": "cell-1", "source": "x"},
              {"cell_type": "code", "id": "cell-1", "source": "y"}]}
            """;

    @Nested
    class Read {

        @Test
        void olderRevision_missingPartsGetTheirEmptyValue() {
            Notebook notebook = Notebook.parse(OF_FORMAT_4_0, "old.ipynb");

            assertThat(notebook.cells()).hasSize(5);
            assertThat(notebook.cells().get(0).source()).isEqualTo("# Title\ntext");
            assertThat(notebook.cells().get(1)).isInstanceOfSatisfying(Cell.Code.class, code -> {
                assertThat(code.mayFail()).isTrue();
                assertThat(code.executionCount()).isEqualTo(OptionalInt.of(3));
                assertThat(code.outputs()).hasSize(4);
                assertThat(code.outputs().get(0)).isEqualTo(new Output.Text("stderr", "one\ntwo"));
                assertThat(code.outputs().get(3)).isEqualTo(new Output.Failed("E", "v", List.of("l1", "l2")));
            });
            assertThat(notebook.cells().get(3)).isInstanceOfSatisfying(Cell.Code.class, code -> {
                assertThat(code.mayFail()).isFalse();
                assertThat(code.executionCount()).isEmpty();
            });
        }

        @Test
        void idsMissingWrongOrRepeated_areMadeUnique() {
            Notebook notebook = Notebook.parse(OF_FORMAT_4_0, "old.ipynb");

            assertThat(notebook.cells())
                    .extracting(Cell::id)
                    .doesNotHaveDuplicates()
                    .contains("cell-1")
                    .allMatch(id -> NotebookReader.CELL_ID.matcher(id).matches());
        }

        @Test
        void idMissing_doesNotTakeOneGivenFurtherDown() {
            String json = "{\"nbformat\": 4, \"cells\": [{\"cell_type\": \"raw\"}, "
                    + "{\"cell_type\": \"raw\", \"id\": \"cell-1\"}]}";

            assertThat(Notebook.parse(json, "n").cells()).extracting(Cell::id).containsExactly("cell-1-2", "cell-1");
        }

        @Test
        void notJson_namesFileAndPlace() {
            assertThatThrownBy(() -> Notebook.parse("{\n  \"cells\": [,]\n}", "tram.ipynb"))
                    .isInstanceOf(DeskException.class)
                    .hasMessageContaining("tram.ipynb")
                    .hasMessageContaining("line 2");
        }

        @Test
        void formatThree_saysWhichIsReadAndWhatToDo() {
            assertThatThrownBy(() -> Notebook.parse("{\"nbformat\": 3}", "old.ipynb"))
                    .isInstanceOf(DeskException.class)
                    .hasMessageContaining("format 3")
                    .hasMessageContaining("Open it in a notebook front end");
        }

        @Test
        void otherJson_saysItIsNoNotebook() {
            assertThatThrownBy(() -> Notebook.parse("[1]", "list.json")).hasMessageContaining("not a notebook");
        }

        @Test
        void unknownCell_namesItsNumberAndType() {
            String json = "{\"nbformat\": 4, \"cells\": [{\"cell_type\": \"heading\"}]}";
            assertThatThrownBy(() -> Notebook.parse(json, "n.ipynb"))
                    .hasMessageContaining("cell 1 of n.ipynb")
                    .hasMessageContaining("'heading'");
        }

        @Test
        void missingFile_namesIt(@TempDir Path folder) {
            assertThatThrownBy(() -> Notebook.read(folder.resolve("none.ipynb")))
                    .isInstanceOf(DeskException.class)
                    .hasMessageContaining("none.ipynb")
                    .hasMessageContaining("Check the name");
        }

        @Test
        void folder_saysSo(@TempDir Path folder) {
            assertThatThrownBy(() -> Notebook.read(folder)).hasMessageContaining("is a folder");
        }
    }

    @Nested
    class Written {

        @Test
        void anyRevision_keepsTheRulesOfFormat45() {
            String json = Notebook.parse(OF_FORMAT_4_0, "old.ipynb").toJson();

            assertThat(NotebookRules.brokenBy(json)).isEmpty();
        }

        @Test
        void rulesOfThisTest_canBeBroken() {
            assertThat(NotebookRules.brokenBy(OF_FORMAT_4_0)).hasSizeGreaterThan(5);
        }

        @Test
        void readAgain_isTheSame() {
            String json = Notebook.parse(OF_FORMAT_4_0, "old.ipynb").toJson();

            assertThat(Notebook.parse(json, "new.ipynb").toJson()).isEqualTo(json);
            assertThat(json).contains("\"own\": [\n   1,\n   2.5\n  ]").contains("\"deep\": [\n        null");
        }

        @Test
        void textOfSeveralLines_keepsTheLineEnds() {
            String json = Notebooks.ofCode("one\n\ntwo\n").toJson();

            assertThat(json).contains("\"one\\n\",").contains("\"\\n\",").contains("\"two\\n\"\n");
            assertThat(Notebook.parse(json, "n").cells().get(0).source()).isEqualTo("one\n\ntwo\n");
        }

        @Test
        void file_readsBackAndLeavesNoPart(@TempDir Path folder) {
            Path file = folder.resolve("n.ipynb");
            Notebooks.ofCode("größer ≥ 1").write(file);

            assertThat(Notebook.read(file).cells().get(0).source()).isEqualTo("größer ≥ 1");
            assertThat(folder).isDirectoryNotContaining("glob:**.part");
        }
    }
}
