package countwright.kernel.cell;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Map;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Cells that nobody means any harm with, and that could still do some. */
@Timeout(120)
class JShellEngineOddCellsTest {

    private static final EngineUnderTest KERNEL = EngineUnderTest.start("256m");

    private static final JShellEngine engine = KERNEL.engine();

    @AfterAll
    static void closeEngine() {
        KERNEL.close();
    }

    private static CellOutcome run(String code) {
        return KERNEL.run(code);
    }

    private static String resultOf(String code) {
        return KERNEL.resultOf(code);
    }

    private static CellOutcome.Failure failureOf(String code) {
        return KERNEL.failureOf(code);
    }

    private static String errOf(String code) {
        Heard heard = new Heard();
        engine.evaluate(code, 2, heard);
        return heard.err();
    }

    private static String outOf(String code) {
        Heard heard = new Heard();
        engine.evaluate(code, 2, heard);
        return heard.out();
    }

    @ParameterizedTest
    @ValueSource(
            strings = {
                "public StackTraceElement[] getStackTrace() { return null; }",
                "public StackTraceElement[] getStackTrace() { throw new IllegalStateException(); }",
                "public String getMessage() { throw new IllegalStateException(); }",
                "public Throwable getCause() { throw new IllegalStateException(); }",
            })
    void exceptionWhoseMethodsFail_isStillAFailureUnderItsName(String method) {
        assertThat(failureOf("throw new IllegalArgumentException(\"x\") { " + method + " };")
                        .name())
                .isEqualTo("IllegalArgumentException");
    }

    @Test
    void exceptionWithEndlessMessage_isCut() {
        assertThat(failureOf("throw new RuntimeException(\"x\".repeat(50_000_000));")
                        .message())
                .hasSizeLessThan(200_000)
                .contains("more characters");
        assertThat(resultOf("1 + 1")).isEqualTo("2");
    }

    @Test
    void exceptionWhoseMessageNeverEnds_canBeInterrupted() throws Exception {
        Heard heard = new Heard();
        CompletableFuture<CellOutcome> outcome = CompletableFuture.supplyAsync(() -> engine.evaluate(
                "throw new RuntimeException() { public String getMessage() {"
                        + " System.out.println(\"asked\"); while (true) {} } };",
                1,
                heard));
        assertThat(heard.awaitSomething()).isTrue();
        engine.interrupt();
        assertThat(outcome.get(30, TimeUnit.SECONDS))
                .isInstanceOfSatisfying(
                        CellOutcome.Failure.class,
                        failure -> assertThat(failure.name()).isEqualTo("Interrupted"));
    }

    @Test
    void firstOfSeveralVariablesFails_theCellFails() {
        assertThat(failureOf("int zero = 1 / 0, two = 2;").name()).isEqualTo("ArithmeticException");
    }

    @Test
    void namesInMessages_areTheUsers() {
        run("String nothing = null;");
        assertThat(failureOf("nothing.length()").message())
                .contains("\"nothing\"")
                .doesNotContain("REPL");
    }

    @Test
    void standardStreamsClosed_laterCellsAreHeard() {
        run("System.out.close(); System.err.close(); System.in.close();");
        assertThat(outOf("System.out.println(\"heard\");")).isEqualTo("heard\n");
        assertThat(errOf("System.err.println(\"too\");")).isEqualTo("too\n");
    }

    @Test
    void printingWhileInterrupted_losesNothing() {
        StringBuilder expected = new StringBuilder();
        for (int i = 0; i < 300_000; i++) {
            expected.append("a line with some length ").append(i).append('\n');
        }
        String printed = outOf("Thread.currentThread().interrupt();\n"
                + "for (int i = 0; i < 300_000; i++) System.out.println(\"a line with some length \" + i);");
        assertThat(printed.equals(expected.toString()))
                .as("all lines, in order")
                .isTrue();
    }

    @Test
    void oneWriteLargerThanAFrame_arrives() {
        assertThat(outOf("System.out.write(new byte[30_000_000], 0, 30_000_000);"))
                .hasSize(30_000_000);
    }

    @Test
    void classesThatReferToEachOther_areDeclaredInOneCell() {
        assertThat(resultOf("class Left { Right right; }\nclass Right { Left left; }\nnew Left().right == null"))
                .isEqualTo("true");
        assertThat(resultOf("sealed interface Shape permits Dot, Line {}\nrecord Dot() implements Shape {}\n"
                        + "record Line() implements Shape {}\nnew Dot()"))
                .isEqualTo("Dot[]");
    }

    @Test
    void classWithAMistypedType_failsBeforeTheNextStatement() {
        Heard heard = new Heard();
        CellOutcome outcome = engine.evaluate("class Wrong { Lsit items; }\nSystem.out.println(1);", 1, heard);
        assertThat(outcome.toString()).contains("CompileError").contains("Lsit");
        assertThat(heard.out()).isEmpty();
    }

    @Test
    void methodThatCallsALaterOne_isSilentIfTheCellDeclaresIt() {
        assertThat(errOf("int early() { return late(); }\nint late() { return 7; }"))
                .isEmpty();
        assertThat(errOf("int waits() { return neverThere(); }")).contains("'waits' refers to method neverThere()");
        assertThat(failureOf("waits()").message()).contains("neverThere()");
    }

    @Test
    void classDeclaredAgainUnchanged_keepsItsInstances() {
        String code = "class Held { int x = 3; }";
        run(code);
        run("var held = new Held();");
        assertThat(errOf(code)).isEmpty();
        assertThat(resultOf("held.x")).isEqualTo("3");
    }

    @Test
    void classDeclaredAnew_saysWhichVariablesItEmptied() {
        run("class Part { int x; }");
        engine.evaluate("Part part = new Part(); var other = new Part();", 9, new Heard());
        assertThat(errOf("class Part { int x, y; }"))
                .contains("'part' of cell [9] has lost its value")
                .contains("'other' of cell [9] has lost its value");
        assertThat(failureOf("other.x").traceback().toString()).contains("Run the cell that sets it again");
    }

    @Test
    void variableDeclaredWithAnotherType_saysWhichMethodsItBreaks() {
        run("int size = 1;\nint twice() { return size * 2; }");
        assertThat(errOf("String size = \"large\";")).contains("'twice'").contains("cannot be used any more");
        assertThat(failureOf("twice()").message())
                .contains("'twice' cannot be run")
                .contains("does not compile");
    }

    @Test
    void threadLeftBehind_isHeardAfterUserExpressions() throws Exception {
        Heard heard = new Heard();
        engine.evaluate(
                "var gate = new java.util.concurrent.CountDownLatch(1);\n"
                        + "new Thread(() -> { try { gate.await(); } catch (InterruptedException e) {}"
                        + " System.out.print(\"later\"); }).start();",
                1,
                heard);
        engine.evaluateExpressions(Map.of("opened", "new Object() { int go() { gate.countDown(); return 1; } }.go()"));
        assertThat(heard.awaitSomething()).isTrue();
        assertThat(heard.out()).isEqualTo("later");
    }

    @Test
    void memoryFullOfSmallThings_cellsStillRunAndCanMendIt() {
        run("List<Object> full = new ArrayList<>();");
        assertThat(failureOf("while (true) full.add(new long[2]);").name()).isEqualTo("OutOfMemoryError");
        run("full = null;");
        assertThat(resultOf("full == null")).isEqualTo("true");
    }

    @Test
    void workerLost_isToldOfOnceAndReplaced() {
        assertThat(failureOf("Runtime.getRuntime().halt(4);").name()).isEqualTo("WorkerLost");
        assertThat(errOf("System.out.println(1);")).isEmpty();
    }
}
