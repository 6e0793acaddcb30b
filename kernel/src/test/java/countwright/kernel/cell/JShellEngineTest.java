package countwright.kernel.cell;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Map;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Nested;
import org.junit.jupiter.api.Test;

class JShellEngineTest {

    private static final EngineUnderTest KERNEL = EngineUnderTest.start("512m");

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

    private static void assertNoResult(String code) {
        assertThat(run(code)).isEqualTo(new CellOutcome.Success(java.util.Optional.empty()));
    }

    @Nested
    class Results {

        @Test
        void lastExpression_withoutSemicolon_isTheResult() {
            assertThat(resultOf("int a = 1;\nint b = 2; // ;\na + b // the sum;"))
                    .isEqualTo("3");
        }

        @Test
        void lastExpression_withSemicolon_isNotShown() {
            assertNoResult("1 + 1;");
            assertNoResult("1 + 1; // two");
        }

        @Test
        void bareVariable_isTheResult() {
            assertThat(resultOf("var word = \"count\";\nword")).isEqualTo("count");
        }

        @Test
        void declarationWithoutSemicolon_hasNoResult() {
            assertNoResult("int declared = 5");
        }

        @Test
        void nullValue_hasNoResult() {
            assertNoResult("(String) null");
        }

        @Test
        void printedLine_isNoResult() {
            assertNoResult("System.out.printf(\"%d%n\", 3)");
        }

        @Test
        void emptyCellAndComments_haveNoResult() {
            assertNoResult("");
            assertNoResult("  \n");
            assertNoResult("// only a comment");
        }

        @Test
        void chainOverLines_isOneExpression() {
            assertThat(resultOf("List.of(1, 2, 3)\n    .stream()\n    .map(i -> i * 2)\n    .toList()"))
                    .contains("2")
                    .contains("6");
        }

        @Test
        void output_arrivesInOrderBeforeTheCellEnds() {
            Heard heard = new Heard();
            engine.evaluate("for (int i = 0; i < 1000; i++) System.out.println(i + \" é\");", 1, heard);
            StringBuilder expected = new StringBuilder();
            for (int i = 0; i < 1000; i++) {
                expected.append(i).append(" é\n");
            }
            assertThat(heard.out()).isEqualTo(expected.toString());
        }

        @Test
        void shownValue_arrivesAsBundle() {
            Heard heard = new Heard();
            engine.evaluate("show(\"hello\");", 1, heard);
            assertThat(heard.shown())
                    .singleElement()
                    .satisfies(bundle -> assertThat(bundle.plainText()).isEqualTo("hello"));
        }

        @Test
        void input_isAskedForAndUsed() {
            Heard heard = new Heard(request -> request.answer(request.prompt() + "!"));
            CellOutcome outcome = engine.evaluate("ask(\"name\") + new Scanner(System.in).nextLine()", 1, heard);
            assertThat(outcome).isInstanceOf(CellOutcome.Success.class);
            assertThat(((CellOutcome.Success) outcome).result().orElseThrow().plainText())
                    .isEqualTo("name!!");
        }

        @Test
        void input_refused_failsWithTheReason() {
            assertThat(failureOf("ask(\"name\")").message()).contains("nobody is there");
        }

        @Test
        void userExpressions_areEvaluatedByName() {
            run("int forExpression = 20;");
            Map<String, CellOutcome> outcomes =
                    engine.evaluateExpressions(Map.of("twice", "forExpression * 2", "bad", "notThere"));
            assertThat(outcomes.get("twice"))
                    .isInstanceOfSatisfying(
                            CellOutcome.Success.class,
                            success -> assertThat(success.result().orElseThrow().plainText())
                                    .isEqualTo("40"));
            assertThat(outcomes.get("bad")).isInstanceOf(CellOutcome.Failure.class);
        }

        @Test
        void kernelLibraries_cannotBeSeenFromCells() {
            assertThat(failureOf("org.zeromq.ZContext z = null;").name()).isEqualTo("CompileError");
            assertThat(failureOf("Class.forName(\"org.zeromq.ZContext\");").name())
                    .isEqualTo("ClassNotFoundException");
        }
    }

    @Nested
    class Errors {

        @Test
        void missingSemicolon_pointsAtTheEndOfTheStatement() {
            assertThat(failureOf("int one = 1\nint two = 2;").traceback())
                    .containsExactly(
                            "Cell [1], line 1, column 12",
                            "    int one = 1",
                            "               ^",
                            "A semicolon is missing here.\n"
                                    + "Only the last expression of a cell may go without one, to show its value.");
        }

        @Test
        void undefinedVariable_isNamedWithANearOne() {
            run("int vehicleCount = 3;");
            assertThat(failureOf("int ok = 1;\nok + vehicleCuont").traceback())
                    .containsExactly(
                            "Cell [1], line 2, column 6",
                            "    ok + vehicleCuont",
                            "         ^^^^^^^^^^^^",
                            "'vehicleCuont' is not known: no variable of that name has been declared or imported.\n"
                                    + "Did you mean 'vehicleCount'?");
        }

        @Test
        void textInSingleQuotes_isToldApartFromAnOpenBracket() {
            assertThat(failureOf("String s = 'hello'").traceback().toString())
                    .contains("double quotes")
                    .doesNotContain("open bracket");
            assertThat(failureOf("?Table").traceback().toString()).doesNotContain("open bracket");
        }

        @Test
        void halfAStatement_failsBeforeAnythingRuns() {
            run("int touched = 0;");
            CellOutcome.Failure failure = failureOf("touched = 1;\nfor (int i = 0; i < 3; i++) {");
            assertThat(failure.name()).isEqualTo("CompileError");
            assertThat(failure.traceback().toString()).contains("close the open bracket");
            assertThat(resultOf("touched")).isEqualTo("0");
        }

        @Test
        void exception_isToldInTheUsersLines() {
            engine.evaluate("int divide(int a, int b) {\n    return a / b;\n}", 7, new Heard());
            assertThat(failureOf("int x = 1;\n\n// on the third line\ndivide(x, 0)")
                            .traceback())
                    .containsExactly(
                            "ArithmeticException: / by zero",
                            "  in cell [7], line 2, in divide:   return a / b;",
                            "  in cell [1], line 4:   divide(x, 0)");
        }

        @Test
        void nullPointer_namesTheVariableAsTheUserDoes() {
            assertThat(failureOf("String text = null;\ntext.length()").traceback())
                    .first()
                    .isEqualTo("NullPointerException: Cannot invoke \"String.length()\" because \"text\" is null");
        }

        @Test
        void exceptionInAVariablesValue_isToldOnItsOwnLineOnce() {
            assertThat(failureOf("var text = List.of(1)\n    .stream()\n    .map(i -> i)\n    .toList()\n    .get(7);")
                            .traceback())
                    .hasSize(2)
                    .last()
                    .isEqualTo("  in cell [1], line 5:   .get(7);");
        }

        @Test
        void misspeltMember_isNamedWithANearOne() {
            run("Table near = Table.of(numbers(\"age\", 1, 2));");
            assertThat(failureOf("near\n    .sumary()").traceback().toString()).contains("Did you mean 'summary'?");
            assertThat(failureOf("near.rowCuont()").traceback().toString()).contains("Did you mean 'rowCount'?");
            assertThat(failureOf("Tabel t = near;").traceback().toString()).contains("Did you mean 'Table'?");
            assertThat(failureOf("near.zzzzzz()").traceback().toString()).doesNotContain("Did you mean");
        }

        @Test
        void exceptionWithCause_tellsBoth() {
            assertThat(failureOf("throw new IllegalStateException(\"outer\", new RuntimeException(\"inner\"));")
                            .traceback())
                    .anyMatch(line -> line.contains("IllegalStateException: outer"))
                    .anyMatch(line -> line.startsWith("because of RuntimeException: inner"));
        }

        @Test
        void laterStatements_doNotRunAfterAnError() {
            run("int counter = 0;");
            failureOf("counter++;\nint[] none = {};\nnone[3] = 1;\ncounter++;");
            assertThat(resultOf("counter")).isEqualTo("1");
        }

        @Test
        void toStringThatThrows_isReported() {
            run("class Sour { public String toString() { throw new RuntimeException(\"no words\"); } }");
            CellOutcome outcome = run("new Sour()");
            assertThat(outcome.toString()).contains("no words");
        }
    }

    @Nested
    class Faults {

        @Test
        void systemExit_isReportedAndTheNextCellRuns() {
            run("int before = 1;");
            CellOutcome.Failure failure = failureOf("System.out.println(\"going\"); System.exit(3);");
            assertThat(failure.name()).isEqualTo("WorkerLost");
            assertThat(failure.message()).contains("System.exit(3)");
            assertThat(resultOf("40 + 2")).isEqualTo("42");
            assertThat(failureOf("before").message()).contains("'before' is not known");
        }

        @Test
        void outputBeforeSystemExit_isNotLost() {
            Heard heard = new Heard();
            engine.evaluate("System.out.println(\"last words\"); System.exit(0);", 1, heard);
            assertThat(heard.out()).isEqualTo("last words\n");
        }

        @Test
        void stackOverflow_keepsVariables() {
            run("int kept = 9; int deep(int n) { return deep(n + 1) + 1; }");
            CellOutcome.Failure failure = failureOf("deep(0)");
            assertThat(failure.name()).isEqualTo("StackOverflowError");
            assertThat(failure.traceback().size()).isLessThan(15);
            assertThat(resultOf("kept")).isEqualTo("9");
        }

        @Test
        void outOfMemory_keepsVariables() {
            run("int keptToo = 8;");
            CellOutcome.Failure failure = failureOf(
                    "List<long[]> hoard = new ArrayList<>();\ntry { while (true) hoard.add(new long[1 << 23]); } finally"
                            + " { hoard.clear(); }");
            assertThat(failure.name()).isEqualTo("OutOfMemoryError");
            assertThat(resultOf("keptToo")).isEqualTo("8");
        }

        @Test
        void killFromOutside_isReportedAndTheNextCellRuns() {
            CellOutcome.Failure failure = failureOf(
                    "new ProcessBuilder(\"kill\", \"-9\", \"\" + ProcessHandle.current().pid()).start().waitFor();"
                            + " Thread.sleep(20000);");
            assertThat(failure.message()).contains("signal 9");
            assertThat(resultOf("1 + 2")).isEqualTo("3");
        }
    }

    @Nested
    class Interrupts {

        private void interruptEnds(String code) throws Exception {
            run("int safe = 5;");
            Heard heard = new Heard();
            CompletableFuture<CellOutcome> outcome = CompletableFuture.supplyAsync(
                    () -> engine.evaluate("System.out.println(\"running\");\n" + code, 1, heard));
            assertThat(heard.awaitSomething()).isTrue();
            engine.interrupt();
            assertThat(outcome.get(5, TimeUnit.SECONDS))
                    .isInstanceOfSatisfying(
                            CellOutcome.Failure.class,
                            failure -> assertThat(failure.name()).isEqualTo("Interrupted"));
            assertThat(resultOf("safe")).isEqualTo("5");
        }

        @Test
        void tightLoop_ends() throws Exception {
            interruptEnds("while (true) {}");
        }

        @Test
        void sleep_ends() throws Exception {
            interruptEnds("Thread.sleep(60000);");
        }

        @Test
        void loopThatCatchesEverything_ends() throws Exception {
            interruptEnds(
                    "int caught = 0; while (caught < 3) { try { while (true) {} } catch (Throwable t) { caught++; } }");
        }

        @Test
        void floodOfOutput_ends() throws Exception {
            interruptEnds("while (true) System.out.println(\"flood\");");
        }

        @Test
        void completion_answersWhileACellRuns() throws Exception {
            Heard heard = new Heard();
            CompletableFuture<CellOutcome> outcome = CompletableFuture.supplyAsync(
                    () -> engine.evaluate("System.out.println(1); while (true) {}", 1, heard));
            assertThat(heard.awaitSomething()).isTrue();
            assertThat(engine.complete("Math.ab", 7).matches())
                    .extracting(Completions.Match::text)
                    .contains("abs(");
            engine.interrupt();
            outcome.get(5, TimeUnit.SECONDS);
        }
    }

    @Nested
    class Assistance {

        @Test
        void completion_worksInTheLastStatementOfACell() {
            Completions completions = engine.complete("int q = 3;\n  Math.sq", 20);
            assertThat(completions.start()).isEqualTo(18);
            assertThat(completions.end()).isEqualTo(20);
            assertThat(completions.matches()).contains(new Completions.Match("sqrt(", "function"));
        }

        @Test
        void completion_ofAnything_leavesOutNamesNobodyGave() {
            run("1 + 1");
            assertThat(engine.complete("List.of(", 8).matches())
                    .isNotEmpty()
                    .noneMatch(match -> match.text().startsWith("$"));
        }

        @Test
        void inspection_showsTheSignature() {
            assertThat(engine.inspect("Math.sqrt(2)", 7, CellEngine.Detail.SIGNATURE)
                            .plainText())
                    .contains("double Math.sqrt(double");
        }

        @Test
        void inspection_ofNothing_isEmpty() {
            assertThat(engine.inspect("   ", 1, CellEngine.Detail.FULL).plainText())
                    .isEmpty();
        }

        @Test
        void completeness_isJudged() {
            assertThat(engine.completeness("1 + 1")).isEqualTo(new Completeness.Complete());
            assertThat(engine.completeness("int f() {")).isEqualTo(new Completeness.Incomplete("    "));
        }
    }
}
