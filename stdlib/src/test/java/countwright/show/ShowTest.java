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
        Show.onto(new RecordingStage());
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

    private final class RecordingStage implements Stage {

        @Override
        public void display(MimeBundle bundle) {
            seen.add("show " + bundle.plainText());
        }

        @Override
        public void display(MimeBundle bundle, String displayId) {
            display(bundle);
        }

        @Override
        public void update(MimeBundle bundle, String displayId) {
            display(bundle);
        }

        @Override
        public void clear(Clearing when) {
            seen.add("clear " + when);
        }

        @Override
        public String ask(String prompt, Echo echo) {
            seen.add("ask " + echo + " " + prompt);
            return "answer";
        }
    }
}
