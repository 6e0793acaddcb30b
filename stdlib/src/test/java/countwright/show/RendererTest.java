package countwright.show;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.awt.image.BufferedImage;
import java.nio.CharBuffer;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;

class RendererTest {

    /** As a user may well write it in a cell. */
    @SuppressWarnings("ArrayRecordComponent")
    private record Site(String name, double[] rates) {}

    private record Named(String name) {
        @Override
        public String toString() {
            return "site " + name;
        }
    }

    private static String text(Object value) {
        return Renderer.render(value).orElseThrow().plainText();
    }

    @Test
    void render_null_givesNothing() {
        assertThat(Renderer.render(null)).isEmpty();
    }

    @Test
    void render_displayable_showsItself() {
        Displayable displayable = () -> MimeBundle.text("plain").withHtml("<b>rich</b>");

        assertThat(Renderer.render(displayable)).contains(displayable.display());
        assertThat(Renderer.render(Optional.of(displayable))).contains(displayable.display());
    }

    @Test
    void render_nestedValues_areWrittenOut() {
        assertThat(text(new int[][] {{1, 2}, {3}})).isEqualTo("[[1, 2], [3]]");
        assertThat(text(Map.of("a", new double[] {0.5}))).isEqualTo("{a=[0.5]}");
        assertThat(text(new Site("Harbour", new double[] {1, 2}))).isEqualTo("Site[name=Harbour, rates=[1.0, 2.0]]");
        assertThat(text(new Named("Quay"))).isEqualTo("site Quay");
        assertThat(text(Optional.of(List.of(1)))).isEqualTo("Optional[[1]]");
        assertThat(text(Optional.empty())).isEqualTo("Optional.empty");
        assertThat(text(CharBuffer.wrap("as\nis"))).isEqualTo("as\nis");
        assertThat(text(2.5)).isEqualTo("2.5");
    }

    @Test
    void render_longValues_sayHowMuchIsLeftOut() {
        assertThat(text(new double[5_000])).endsWith(", … 4,900 more]");
        assertThat(text(IntStream.range(0, 2_000).boxed().toList())).endsWith("98, 99, … 1,900 more]");
        assertThat(text("x".repeat(250_000))).endsWith("\n… 50,000 more characters");
    }

    @Test
    void render_valueThatContainsItself_ends() {
        List<Object> loop = new ArrayList<>();
        loop.add(loop);

        assertThat(text(loop)).contains("…");
    }

    @Test
    void render_throwable_showsMessageCauseAndFrames() {
        Throwable thrown = new IllegalStateException("outer", new IllegalArgumentException("inner"));

        assertThat(text(thrown))
                .startsWith("java.lang.IllegalStateException: outer\n    at countwright.show.RendererTest")
                .contains("\ncaused by java.lang.IllegalArgumentException: inner");
    }

    @Test
    void render_image_becomesPngWithItsSize() {
        MimeBundle bundle = Renderer.render(new BufferedImage(6, 4, BufferedImage.TYPE_INT_ARGB))
                .orElseThrow();

        assertThat(bundle.get(MimeBundle.PNG).orElseThrow()).startsWith("iVBORw0KGgo");
        assertThat(bundle.metadata().get(MimeBundle.PNG))
                .containsEntry("width", 6)
                .containsEntry("height", 4);
        assertThat(bundle.plainText()).isEqualTo("picture, 6 × 4 pixels");
    }

    @Test
    void render_valueWhoseTextFails_isReportedInItsPlace() {
        Object broken = new Object() {
            @Override
            public String toString() {
                throw new IllegalStateException("no text today");
            }
        };
        Displayable brokenDisplay = () -> {
            throw new IllegalStateException("no picture today");
        };

        assertThat(text(broken)).contains("RendererTest", "cannot be shown", "no text today");
        assertThat(text(brokenDisplay)).contains("display()", "no picture today");
    }

    @Test
    void render_errorThatStopsACell_passesThrough() {
        class Stop extends Error {}
        Displayable stopped = () -> {
            throw new Stop();
        };

        assertThatThrownBy(() -> Renderer.render(stopped)).isInstanceOf(Stop.class);
    }
}
