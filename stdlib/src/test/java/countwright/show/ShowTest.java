package countwright.show;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;

class ShowTest {

    private final List<String> seen = new ArrayList<>();
    private Stage before = new Terminal();

    @BeforeEach
    void putStageInPlace() {
        before = Show.stage();
        Show.onto(new RecordingStage(seen));
    }

    @AfterEach
    void putStageBack() {
        Show.onto(before);
    }

    @Test
    void show_severalValues_showsEachInOrder() {
        Show.show("one", 2, null, Grid.titled("three"));

        assertThat(seen).containsExactly("show one", "show 2", "show null", "show three");
    }

    @Test
    void show_nullAlone_showsNull() {
        Show.show((Object[]) null);

        assertThat(seen).containsExactly("show null");
    }

    @Test
    void ask_passesPromptAndEcho() {
        assertThat(Show.ask("depot?")).isEqualTo("answer");
        assertThat(Show.askHidden("key?")).isEqualTo("answer");

        assertThat(seen).containsExactly("ask VISIBLE depot?", "ask HIDDEN key?");
    }

    @Test
    void clear_clearsAtOnce() {
        Show.clear();

        assertThat(seen).containsExactly("clear NOW");
    }

    @Test
    void replaceable_isShownOnceAndReplacedInItsPlace() {
        Shown place = Show.showReplaceable("first");
        place.replaceWith(2);

        assertThat(seen).containsExactly("place first", "replace 2");
    }

    @Test
    void pageAndNextInput_reachTheStage() {
        Show.page(Grid.titled("long table"));
        Show.nextInput("1 + 1");

        assertThat(seen).containsExactly("page long table", "next 1 + 1");
    }

    @Test
    void progressOverItems_givesAllOfThemAndEndsComplete() {
        List<String> taken = new ArrayList<>();
        for (String site : Show.progress("sites", List.of("Harbour", "Orchard"))) {
            taken.add(site);
        }
        for (String none : Show.progress("nothing", List.<String>of())) {
            taken.add(none);
        }

        assertThat(taken).containsExactly("Harbour", "Orchard");
        assertThat(seen).first().isEqualTo("place sites: 0 of 2 (0 %)");
        assertThat(seen).last().asString().startsWith("replace sites: 2 of 2 (100 %)");
    }
}
