package countwright.kernel.cell;

import static org.assertj.core.api.Assertions.assertThat;

import countwright.kernel.worker.WorkerSettings;

/** A real engine with a real worker, and the questions tests ask of it. */
final class EngineUnderTest implements AutoCloseable {

    private final JShellEngine engine;

    private EngineUnderTest(JShellEngine engine) {
        this.engine = engine;
    }

    static EngineUnderTest start(String memory) {
        return new EngineUnderTest(
                JShellEngine.start(WorkerSettings.ofInstallation().withJvmOption("-Xmx" + memory)));
    }

    JShellEngine engine() {
        return engine;
    }

    CellOutcome run(String code) {
        return engine.evaluate(code, 1, new Heard());
    }

    String resultOf(String code) {
        CellOutcome outcome = run(code);
        assertThat(outcome).isInstanceOf(CellOutcome.Success.class);
        return ((CellOutcome.Success) outcome).result().orElseThrow().plainText();
    }

    CellOutcome.Failure failureOf(String code) {
        CellOutcome outcome = run(code);
        assertThat(outcome).isInstanceOf(CellOutcome.Failure.class);
        return (CellOutcome.Failure) outcome;
    }

    @Override
    public void close() {
        engine.close();
    }
}
