package countwright.kernel.cell;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;

/** What cells send and hear besides their result, through a real worker. */
@Timeout(120)
@SuppressWarnings("NullAway.Init")
class JShellEngineCommsTest {

    private static EngineUnderTest session;

    @BeforeAll
    static void start() {
        session = EngineUnderTest.start("128m");
    }

    @AfterAll
    static void stop() {
        session.close();
    }

    @Test
    void message_isAnsweredWhileACellRuns_andWhatTheHandlerPrintsIsItsOwn() throws Exception {
        session.run("Comms.onOpen(\"echo\", comm -> comm.onMessage(data -> {\n"
                + "    System.out.print(\"heard \" + data.get(\"n\")); comm.send(data); }));");
        Heard cell = new Heard();
        CompletableFuture<CellOutcome> running = CompletableFuture.supplyAsync(
                () -> session.engine().evaluate("System.out.print(\"on\"); while (true) {}", 2, cell));
        assertThat(cell.awaitSomething()).isTrue();

        Heard opening = send(CommMessage.Kind.OPEN, "c1", "echo", Map.of());
        Map<String, Object> data = Map.of("n", 3L, "all", List.of(2.5, true, "é 🚋", Optional.empty()));
        Heard message = send(CommMessage.Kind.MESSAGE, "c1", "", data);

        assertThat(message.takeComm()).isEqualTo(new CommMessage(CommMessage.Kind.MESSAGE, "c1", "", data));
        assertThat(message.out()).isEqualTo("heard 3");
        assertThat(opening.out()).isEmpty();
        assertThat(cell.out()).isEqualTo("on");
        assertThat(running).isNotDone();
        session.engine().interrupt();
        assertThat(running.get(30, TimeUnit.SECONDS)).isInstanceOf(CellOutcome.Failure.class);
    }

    @Test
    void handlerThatFails_isReportedWithItsCellOnly_andTheNextMessageIsHandled() throws Exception {
        session.engine()
                .evaluate(
                        "Comms.onOpen(\"fragile\", comm -> comm.onMessage(data -> {\n"
                                + "    if (data.isEmpty()) throw new IllegalStateException(\"no depot\"); comm.send(data); }));",
                        7,
                        new Heard());
        send(CommMessage.Kind.OPEN, "c2", "fragile", Map.of());

        Heard failing = send(CommMessage.Kind.MESSAGE, "c2", "", Map.of());
        Heard next = send(CommMessage.Kind.MESSAGE, "c2", "", Map.of("n", 1L));

        assertThat(failing.err()).isEqualTo("A comm handler failed. IllegalStateException: no depot\n  in cell [7]\n");
        assertThat(next.takeComm().data()).containsEntry("n", 1L);
    }

    @Test
    void unknownTarget_isClosed() throws Exception {
        Heard opening = send(CommMessage.Kind.OPEN, "c3", "nobody", Map.of());

        assertThat(opening.takeComm().kind()).isEqualTo(CommMessage.Kind.CLOSE);
    }

    @Test
    void openedByACell_isTheCells() throws Exception {
        Heard cell = new Heard();
        session.engine().evaluate("var lamp = Comms.open(\"lamp\", Map.of(\"colour\", \"green\"));", 3, cell);

        CommMessage opened = cell.takeComm();
        assertThat(opened.target()).isEqualTo("lamp");
        assertThat(opened.data()).isEqualTo(Map.of("colour", "green"));
        send(CommMessage.Kind.CLOSE, opened.commId(), "", Map.of());
        assertThat(session.resultOf("lamp.isOpen()")).isEqualTo("false");
    }

    @Test
    void handlerThatSleeps_isInterruptedWhenNoCellRuns() throws Exception {
        session.run(
                "Comms.onOpen(\"sleepy\", comm -> { System.out.print(\"zzz\");\n"
                        + "    try { Thread.sleep(100_000); } catch (InterruptedException e) { System.out.print(\"awake\"); } });");
        Heard opening = new Heard();
        CountDownLatch handled = new CountDownLatch(1);
        session.engine()
                .receive(new CommMessage(CommMessage.Kind.OPEN, "c4", "sleepy", Map.of()), opening, handled::countDown);
        assertThat(opening.awaitSomething()).isTrue();

        session.engine().interrupt();

        assertThat(handled.await(20, TimeUnit.SECONDS)).isTrue();
        assertThat(opening.out()).isEqualTo("zzzawake");
    }

    @Test
    void workerLost_endsTheHandlingAndIsTold() throws Exception {
        CountDownLatch lost = new CountDownLatch(1);
        CountDownLatch handled = new CountDownLatch(1);
        session.engine().whenWorkerIsLost(lost::countDown);
        session.run("Comms.onOpen(\"deadly\", comm -> Runtime.getRuntime().halt(3));");
        session.engine()
                .receive(
                        new CommMessage(CommMessage.Kind.OPEN, "c5", "deadly", Map.of()),
                        new Heard(),
                        handled::countDown);

        assertThat(handled.await(20, TimeUnit.SECONDS)).isTrue();
        assertThat(lost.await(20, TimeUnit.SECONDS)).isTrue();
        assertThat(session.resultOf("6 * 7")).isEqualTo("42");
    }

    @Test
    void pageAndProgress_reachTheListenerInOrder() {
        Heard cell = new Heard();
        session.engine()
                .evaluate("for (int i : progress(\"sites\", List.of(1, 2))) {} page(\"a long text\");", 4, cell);

        assertThat(cell.shown()).extracting(MimeBundle::plainText).first().isEqualTo("sites: 0 of 2 (0 %)");
        assertThat(cell.shown()).extracting(MimeBundle::plainText).last().isEqualTo("a long text");
    }

    @Test
    void refusedQuestion_saysWhyHoweverItIsAsked() {
        for (String code : List.of(
                "new Scanner(System.in).nextLine()",
                "new Scanner(System.in).nextInt()",
                "new java.io.BufferedReader(new java.io.InputStreamReader(System.in)).readLine()",
                "System.in.read()",
                "askHidden(\"key\")")) {
            assertThat(session.failureOf(code).message()).as(code).isEqualTo("nobody is there");
        }
        assertThat(session.resultOf("System.console() == null")).isEqualTo("true");
    }

    @Test
    void interruptedBeforeTheEngineKnewOfIt_theCellDoesNotRun() {
        Heard cell = new Heard();
        CellOutcome outcome = session.engine().evaluate("System.out.print(\"ran\");", 5, new InterruptedEarly(cell));

        assertThat(outcome)
                .isInstanceOfSatisfying(
                        CellOutcome.Failure.class,
                        failure -> assertThat(failure.name()).isEqualTo("Interrupted"));
        assertThat(cell.out()).isEmpty();
    }

    @Test
    void interruptedWhileTheSessionStarts_endsAtOnce() throws Exception {
        try (EngineUnderTest starting = EngineUnderTest.start("64m")) {
            CompletableFuture<CellOutcome> running =
                    CompletableFuture.supplyAsync(() -> starting.run("while (true) {}"));
            // Until the cell has begun an interrupt finds nothing to stop.
            while (!running.isDone()) {
                starting.engine().interrupt();
                Thread.onSpinWait();
            }
            assertThat(running.get())
                    .isInstanceOfSatisfying(
                            CellOutcome.Failure.class,
                            failure -> assertThat(failure.name()).isEqualTo("Interrupted"));
            assertThat(starting.resultOf("6 * 7")).isEqualTo("42");
        }
    }

    private Heard send(CommMessage.Kind kind, String id, String target, Map<String, Object> data) throws Exception {
        Heard heard = new Heard();
        CountDownLatch handled = new CountDownLatch(1);
        session.engine().receive(new CommMessage(kind, id, target, data), heard, handled::countDown);
        assertThat(handled.await(20, TimeUnit.SECONDS)).as("handled").isTrue();
        return heard;
    }
}
