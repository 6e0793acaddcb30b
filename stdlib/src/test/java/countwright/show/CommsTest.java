package countwright.show;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;

class CommsTest {

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
    void openedByTheFrontEnd_messagesReachTheHandlerAndAnswersGoBack() {
        Comms.onOpen("echo", comm -> comm.onMessage(comm::send).onClose(data -> seen.add("gone " + data)));
        receive(CommMessage.Kind.OPEN, "echo", Map.of());
        receive(CommMessage.Kind.MESSAGE, "", Map.of("n", 1));
        receive(CommMessage.Kind.CLOSE, "", Map.of("why", "done"));
        receive(CommMessage.Kind.MESSAGE, "", Map.of("n", 2));

        assertThat(seen).containsExactly("MESSAGE  {n=1}", "gone {why=done}");
    }

    @Test
    void unknownTarget_isClosed() {
        receive(CommMessage.Kind.OPEN, "nobody", Map.of());

        assertThat(seen).containsExactly("CLOSE  {}");
    }

    @Test
    void openHandlerThatFails_closesTheCommAndPassesItsErrorOn() {
        Comms.onOpen("broken", comm -> {
            throw new IllegalStateException("no depot");
        });
        assertThatThrownBy(() -> receive(CommMessage.Kind.OPEN, "broken", Map.of()))
                .hasMessage("no depot");

        assertThat(seen).containsExactly("CLOSE  {}");
    }

    @Test
    void openedHere_isToldToTheFrontEnd_andClosedOnce() {
        Comm comm = Comms.open("lamp", Map.of("colour", "green"));
        comm.send(Map.of("colour", "red"));
        comm.close();
        comm.close();

        assertThat(seen).containsExactly("OPEN lamp {colour=green}", "MESSAGE  {colour=red}", "CLOSE  {}");
        assertThatThrownBy(() -> comm.send(Map.of()))
                .isInstanceOf(IllegalStateException.class)
                .hasMessageContaining("'lamp' is closed");
    }

    @Test
    void data_becomesWhatJsonHas_andIsImmutable() {
        CommMessage message = new CommMessage(
                CommMessage.Kind.MESSAGE,
                "id",
                "",
                Map.of("all", Arrays.asList(1, 2.5f, "x", true, null, Optional.of(3), Map.of("k", 'c'))));

        assertThat(message.data())
                .isEqualTo(Map.of("all", List.of(1L, 2.5, "x", true, Optional.empty(), 3L, Map.of("k", "c"))));
        assertThatThrownBy(() -> message.data().put("more", 1)).isInstanceOf(UnsupportedOperationException.class);
    }

    @Test
    void dataThatJsonDoesNotHave_isRefusedWithItsPlace() {
        Comm comm = Comms.open("lamp", Map.of());
        List<Object> itself = new ArrayList<>();
        itself.add(itself);

        assertThatThrownBy(() -> comm.send(Map.of("a", List.of(1, Double.NaN))))
                .hasMessageContaining("data.a[1] is NaN");
        assertThatThrownBy(() -> comm.send(Map.of("a", new Object()))).hasMessageContaining("data.a is of type Object");
        assertThatThrownBy(() -> comm.send(Map.of("a", Map.of(1, 2)))).hasMessageContaining("the key 1");
        assertThatThrownBy(() -> comm.send(Map.of("a", itself))).hasMessageContaining("Does it contain itself?");
    }

    @Test
    void withoutAFrontEnd_openingSaysSo() {
        Show.onto(new Terminal());

        assertThatThrownBy(() -> Comms.open("lamp", Map.of())).hasMessageContaining("no front end");
    }

    private static void receive(CommMessage.Kind kind, String target, Map<String, Object> data) {
        Comms.receive(new CommMessage(kind, "from-the-front-end", target, data));
    }
}
