package countwright.show;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;

class ProgressTest {

    private static final long MILLI = 1_000_000;

    private final List<String> seen = new ArrayList<>();
    private long now = 5 * MILLI;

    @Test
    void steps_areShownFiveTimesASecondAtMost_andTheLastAlways() {
        try (Progress progress = start("fits", 1000)) {
            for (int i = 0; i < 1000; i++) {
                now += MILLI;
                progress.step();
            }
        }

        assertThat(seen)
                .containsExactly(
                        "place fits: 0 of 1000 (0 %)",
                        "replace fits: 200 of 1000 (20 %)",
                        "replace fits: 400 of 1000 (40 %)",
                        "replace fits: 600 of 1000 (60 %)",
                        "replace fits: 800 of 1000 (80 %)",
                        "replace fits: 1000 of 1000 (100 %)",
                        "replace fits: 1000 of 1000 (100 %), 1 s");
    }

    @Test
    void longWork_saysAboutHowMuchTimeIsLeft() {
        Progress progress = start("rows", 100);
        now += 30_000 * MILLI;
        progress.at(25);

        assertThat(seen).last().isEqualTo("replace rows: 25 of 100 (25 %), about 1 min 30 s left");
    }

    @Test
    void countThatIsOff_isShownAsItIs() {
        Progress progress = start("rows", 10);
        progress.step(15);
        progress.close();
        progress.step();
        progress.close();

        assertThat(seen).last().isEqualTo("replace rows: 15 of 10 (100 %), 0 s");
        assertThat(seen).hasSize(2);
    }

    @Test
    void badNumbers_areNamed() {
        assertThatThrownBy(() -> start("rows", 0))
                .hasMessageContaining("total must be positive, but for 'rows' it is 0");
        assertThatThrownBy(() -> start("rows", 3).step(-1)).hasMessageContaining("-1");
        assertThatThrownBy(() -> start("rows", 3).at(-2)).hasMessageContaining("-2");
    }

    @Test
    void html_hasATextAlternativeAndEscapesTheLabel() {
        List<MimeBundle> bundles = new ArrayList<>();
        Stage keeping = new KeepingStage(bundles);
        Progress.of("a < b", 4, keeping, () -> now).close();

        assertThat(bundles.get(0).get(MimeBundle.HTML).orElseThrow())
                .contains("role=\"progressbar\"", "aria-valuenow=\"0\"", "a &lt; b")
                .doesNotContain("a < b", "<script", "<style");
    }

    private Progress start(String label, long total) {
        return Progress.of(label, total, new RecordingStage(seen), () -> now);
    }

    private static final class KeepingStage implements Stage {

        private final List<MimeBundle> bundles;

        KeepingStage(List<MimeBundle> bundles) {
            this.bundles = bundles;
        }

        @Override
        public void display(MimeBundle bundle) {
            bundles.add(bundle);
        }

        @Override
        public void display(MimeBundle bundle, String displayId) {
            bundles.add(bundle);
        }

        @Override
        public void update(MimeBundle bundle, String displayId) {
            bundles.add(bundle);
        }

        @Override
        public void clear(Clearing when) {}

        @Override
        public String ask(String prompt, Echo echo) {
            return "";
        }

        @Override
        public void page(MimeBundle bundle) {}

        @Override
        public void nextInput(String code) {}

        @Override
        public void send(CommMessage message) {}
    }
}
