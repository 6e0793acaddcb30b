package countwright.kernel.cell;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.stream.Collectors;
import java.util.stream.IntStream;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestInstance;

/** What a session keeps and what it lets go of; how that pays in time is measured by the soak run. */
@TestInstance(TestInstance.Lifecycle.PER_CLASS)
class LongSessionTest {

    private final EngineUnderTest session = EngineUnderTest.start("768m");

    @BeforeAll
    void declareManyVariables() {
        String declarations = IntStream.range(0, 60)
                .mapToObj(i -> "int number" + i + " = " + i + ";")
                .collect(Collectors.joining("\n"));
        assertThat(session.run(declarations)).isInstanceOf(CellOutcome.Success.class);
    }

    @AfterAll
    void close() {
        session.close();
    }

    @Test
    void booksOfJShellCanBeKeptOnThisJdk() {
        jdk.jshell.JShell shell =
                jdk.jshell.JShell.builder().executionEngine("local").build();
        assertThat(new SnippetLedger(shell).isOpen()).isTrue();
        shell.close();
    }

    @Test
    void variablesAmongManyAreFoundWhereverTheyAreNamed() {
        assertThat(session.resultOf("number3 + number59")).isEqualTo("62");
        assertThat(session.resultOf("int sum = number1 + number2;\nsum")).isEqualTo("3");
        session.run("int twice() { return 2 * number7; }");
        assertThat(session.resultOf("twice()")).isEqualTo("14");
        session.run("number7 = 10;");
        assertThat(session.resultOf("twice()")).isEqualTo("20");
    }

    @Test
    void declaringAVariableAnewReachesMethodsThatNameIt() {
        session.run("String half() { return \"half of \" + number8; }");
        session.run("String number8 = \"eight\";");
        assertThat(session.resultOf("half()")).isEqualTo("half of eight");
    }

    @Test
    void declaringAClassAnewReachesVariablesAmongMany() {
        session.run("class Box { int side = 1; }");
        session.run("Box box = new Box();");
        session.run("class Box { int side = 2; String name = \"wide\"; }");
        assertThat(session.resultOf("box == null")).isEqualTo("true");
        session.run("box = new Box();");
        assertThat(session.resultOf("box.name + box.side")).isEqualTo("wide2");
    }

    @Test
    void variableOfAnUnnamedTypeKeepsItsMembers() {
        session.run("var pair = new Object() { int left = 1; int right = 2; };");
        session.run("var other = pair;");
        assertThat(session.resultOf("other.left + pair.right")).isEqualTo("3");
    }

    @Test
    void misspeltVariableAmongManyIsRecognised() {
        assertThat(session.failureOf("number5 + nunber6").traceback())
                .anySatisfy(line -> assertThat(line).contains("number6"));
    }

    @Test
    void lambdaOfAnEarlierCellStillPointsAtItsLine() {
        session.engine().evaluate("Runnable later;", 7, new Heard());
        session.engine()
                .evaluate(
                        "// sets it\nlater = () -> {\n    throw new IllegalStateException(\"too late\");\n};",
                        8,
                        new Heard());
        CellOutcome.Failure failure = (CellOutcome.Failure) session.engine().evaluate("later.run()", 9, new Heard());
        assertThat(failure.traceback())
                .anySatisfy(line -> assertThat(line).startsWith("  in cell [8], line 3, in a lambda"))
                .anySatisfy(line -> assertThat(line).startsWith("  in cell [9], line 1"));
    }

    @Test
    void resultsAreWhatTheyWouldBeInJava() {
        assertThat(session.resultOf("true ? 1 : 2.0")).isEqualTo("1.0");
        assertThat(session.resultOf("'a'")).isEqualTo("a");
        assertThat(session.resultOf("number1 == 1 // a comment")).isEqualTo("true");
        assertThat(session.resultOf("List.of()")).isEqualTo("[]");
        assertThat(session.resultOf("switch (number1) { case 1 -> 1; default -> 2.5; }"))
                .isEqualTo("1.0");
        assertThat(session.resultOf("int.class")).isEqualTo("int");
        assertThat(session.resultOf("number9 = 5")).isEqualTo("5");
        assertThat(((CellOutcome.Success) session.run("(Object) null")).result())
                .isEmpty();
        assertThat(((CellOutcome.Success) session.run("System.out.println(number1)")).result())
                .isEmpty();
    }

    @Test
    void bracketsThatCloseMoreThanTheyOpenAreAnError() {
        assertThat(session.run("1); System.exit(2")).isInstanceOf(CellOutcome.Failure.class);
        assertThat(session.resultOf("1 + 1")).isEqualTo("2");
    }

    /** Twenty times 300 MB in a heap of 768 MB: what can no longer be named must be gone. */
    @Test
    void largeValuesThatCanNoLongerBeNamedAreReleased() {
        for (int i = 0; i < 20; i++) {
            assertThat(session.run("byte[] large = new byte[300_000_000];")).isInstanceOf(CellOutcome.Success.class);
            session.run("large = null;");
            assertThat(session.run("new byte[300_000_000]")).isInstanceOf(CellOutcome.Success.class);
            String type = i % 2 == 0 ? "Object" : "byte[]";
            assertThat(session.run(type + " changing = new byte[300_000_000];"))
                    .isInstanceOf(CellOutcome.Success.class);
            session.run("changing = null;");
        }
    }

    @Test
    void valueOfAVariableDeclaredWithAnotherTypeIsReleased() {
        session.run("import java.lang.ref.WeakReference;");
        session.run("Object held = new Object();");
        session.run("var watch = new WeakReference<>(held);");
        session.run("int held = 1;");
        session.run("for (int i = 0; i < 50 && watch.get() != null; i++) { System.gc(); Thread.sleep(20); }");
        assertThat(session.resultOf("watch.get() == null")).isEqualTo("true");
    }

    @Test
    void variablesDeclaredAnewHaveTheirNewValues() {
        for (int i = 0; i < 3; i++) {
            assertThat(session.resultOf("int[] same = {1, 2}; int count = 0;\nsame.length"))
                    .isEqualTo("2");
            assertThat(session.resultOf("int[] changed = new int[" + i + "]; String told = \"n" + i + "\";\n"
                            + "told + changed.length"))
                    .isEqualTo("n" + i + i);
        }
    }

    @Test
    void variableThatALambdaNamesKeepsItsValueForIt() {
        session.run("var seen = List.of(1, 2, 3);\njava.util.function.Supplier<Integer> size = () -> seen.size();");
        session.run("var seen = List.of(9);");
        assertThat(session.resultOf("size.get()")).isIn("3", "1");
        session.run("var calls = new ArrayList<java.util.function.Supplier<Integer>>();");
        session.run("int[] counted = {1};");
        session.run("calls.add(() -> counted.length);");
        session.run("String counted = \"other\";");
        assertThat(session.resultOf("calls.get(0).get()")).isEqualTo("1");
    }

    @Test
    void variableMadeFromAnotherKeepsItsValueWhenThatIsDeclaredAnew() {
        session.run("int base = 1;\nvar next = base + 1;");
        session.run("int base = 5;");
        assertThat(session.resultOf("next")).isEqualTo("2");
        session.run("long base = 6;");
        assertThat(session.resultOf("next + base")).isEqualTo("8");
    }

    @Test
    void valueOfABareExpressionIsReleased() {
        session.run("Object shown = new Object(); var look = new java.lang.ref.WeakReference<>(shown);");
        session.run("look.get()");
        session.run("switch (1) { default -> look.get(); }");
        session.run("shown = null;");
        session.run("for (int i = 0; i < 50 && look.get() != null; i++) { System.gc(); Thread.sleep(20); }");
        assertThat(session.resultOf("look.get() == null")).isEqualTo("true");
    }
}
