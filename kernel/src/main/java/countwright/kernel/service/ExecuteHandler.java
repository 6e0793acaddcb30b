package countwright.kernel.service;

import countwright.kernel.cell.CellOutcome;
import countwright.kernel.cell.CellOutcome.Failure;
import countwright.kernel.cell.CellOutcome.Success;
import countwright.show.MimeBundle;
import java.lang.System.Logger;
import java.lang.System.Logger.Level;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import tools.jackson.databind.node.ObjectNode;

/**
 * Answers {@code execute_request}: runs one cell.
 *
 * <p>Only cells that go into the history count: neither silent ones, nor those with store_history false, nor blank ones.
 * They bear the number of the last that counted. A silent cell publishes neither its code nor its result; text that it
 * prints, what it shows and its error are still published, as front ends have come to expect.
 */
final class ExecuteHandler implements Handler {

    private static final Logger LOG = System.getLogger(ExecuteHandler.class.getName());

    private final EngineGate engine;
    private final Outbox outbox;
    private final InputDesk inputDesk;
    private final CommDesk comms;
    private final History history;

    /** Touched by the thread whose turn it is to run a cell. */
    private int executionCount;

    ExecuteHandler(EngineGate engine, Outbox outbox, InputDesk inputDesk, CommDesk comms, History history) {
        this.engine = engine;
        this.outbox = outbox;
        this.inputDesk = inputDesk;
        this.comms = comms;
        this.history = history;
    }

    @Override
    public Optional<ObjectNode> answer(Request request) {
        Content content = request.content();
        String code = content.text("code");
        boolean silent = content.flag("silent", false);
        boolean counts = !silent && content.flag("store_history", true) && !code.isBlank();
        Map<String, String> expressions = content.texts("user_expressions");
        EngineGate.Turn turn = engine.turn();
        CellBroadcast broadcast = new CellBroadcast(request, outbox, inputDesk, comms, turn::isInterrupted);
        if (counts) {
            executionCount++;
        }
        if (!silent) {
            broadcast.input(code, executionCount);
        }
        // A blank cell does nothing: it need not wait for the engine, unless there is something to evaluate after it.
        CellOutcome outcome = code.isBlank() && expressions.isEmpty()
                ? new Success(Optional.empty())
                : evaluate(code, broadcast, turn);
        inputDesk.cancel("The cell ended before the question was answered.");
        Optional<MimeBundle> result = outcome instanceof Success success ? success.result() : Optional.empty();
        if (counts) {
            history.add(executionCount, code, result.map(MimeBundle::plainText));
        }
        if (outcome instanceof Failure failure) {
            ObjectNode error = Replies.object();
            Replies.putError(error, failure);
            broadcast.error(error);
            return Optional.of(finished(Replies.error(failure)));
        }
        if (!silent) {
            result.ifPresent(bundle -> broadcast.result(bundle, executionCount));
        }
        ObjectNode reply = finished(Replies.ok());
        reply.set("user_expressions", evaluated(expressions, turn));
        reply.set("payload", broadcast.payload());
        return Optional.of(reply);
    }

    private ObjectNode finished(ObjectNode reply) {
        reply.put("execution_count", executionCount);
        reply.putArray("payload");
        reply.putObject("user_expressions");
        return reply;
    }

    private CellOutcome evaluate(String code, CellBroadcast broadcast, EngineGate.Turn turn) {
        try {
            return turn.await().evaluate(code, executionCount, broadcast);
        } catch (EngineGate.NoEngineException e) {
            return new Failure(e.kind(), e.text(), List.of(e.kind() + ": " + e.text()));
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            return kernelFailure("The kernel is shutting down.");
        } catch (RuntimeException | Error e) {
            LOG.log(Level.ERROR, "The engine failed to run a cell.", e);
            return kernelFailure("The kernel itself failed while it ran this cell; its log has the details."
                    + " Run the cell again; if it fails again, restart the kernel.");
        }
    }

    private ObjectNode evaluated(Map<String, String> expressions, EngineGate.Turn turn) {
        ObjectNode all = Replies.object();
        if (expressions.isEmpty()) {
            return all;
        }
        Map<String, CellOutcome> outcomes = outcomes(expressions, turn);
        for (String name : expressions.keySet()) {
            CellOutcome outcome = outcomes.getOrDefault(name, kernelFailure("The expression was not evaluated."));
            all.set(name, outcome instanceof Failure failure ? Replies.error(failure) : value((Success) outcome));
        }
        return all;
    }

    private Map<String, CellOutcome> outcomes(Map<String, String> expressions, EngineGate.Turn turn) {
        try {
            return turn.await().evaluateExpressions(expressions);
        } catch (EngineGate.NoEngineException e) {
            return Map.of();
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            return Map.of();
        } catch (RuntimeException e) {
            LOG.log(Level.ERROR, "The engine failed to evaluate user_expressions.", e);
            return Map.of();
        }
    }

    private static ObjectNode value(Success success) {
        ObjectNode value = Replies.ok();
        Replies.putBundle(value, success.result().orElse(MimeBundle.text("")));
        return value;
    }

    private static Failure kernelFailure(String message) {
        return new Failure("KernelError", message, List.of("KernelError: " + message));
    }
}
