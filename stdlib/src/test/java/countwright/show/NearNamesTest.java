package countwright.show;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;

class NearNamesTest {

    private static final List<String> NAMES = List.of("vehicleKm", "depot", "doorType", "age");

    @Test
    void of_misspeltNames_findsTheNearestFirst() {
        assertThat(NearNames.of("vehicel_km", NAMES)).containsExactly("vehicleKm");
        assertThat(NearNames.of("DEPOT", NAMES)).containsExactly("depot");
        assertThat(NearNames.of("dor_type", NAMES)).containsExactly("doorType");
        assertThat(NearNames.of("door", NAMES)).containsExactly("doorType");
        assertThat(NearNames.of("aeg", NAMES)).containsExactly("age");
        assertThat(NearNames.of("ab", List.of("abc", "ab1", "a", "b"))).hasSize(3);
    }

    @Test
    void of_nothingNear_isEmpty() {
        assertThat(NearNames.of("temperature", NAMES)).isEmpty();
        assertThat(NearNames.question("temperature", NAMES)).isEmpty();
    }

    @Test
    void question_severalNear_namesThem() {
        assertThat(NearNames.question("dept", List.of("depot", "depth"))).isEqualTo("Did you mean 'depot' or 'depth'?");
    }

    @Test
    void list_longList_countsTheRest() {
        List<String> many = IntStream.range(0, 40).mapToObj(i -> "c" + i).toList();

        assertThat(NearNames.list(many)).endsWith("c11 and 28 more");
        assertThat(NearNames.list(List.of("a", "b"))).isEqualTo("a, b");
    }
}
