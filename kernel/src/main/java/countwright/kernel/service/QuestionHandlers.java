package countwright.kernel.service;

import countwright.kernel.cell.CellEngine;
import countwright.kernel.cell.Completeness;
import countwright.kernel.cell.Completions;
import countwright.show.MimeBundle;
import java.util.Optional;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.ObjectNode;

/** Answers questions about code that is not run: is it complete, what could follow, what does it mean. */
final class QuestionHandlers {

    private final EngineGate engine;

    QuestionHandlers(EngineGate engine) {
        this.engine = engine;
    }

    /** Answers {@code is_complete_request}. */
    Handler isComplete() {
        return withEngine((content, cells) -> {
            Completeness found = cells.completeness(content.text("code"));
            ObjectNode reply = Replies.object();
            if (found instanceof Completeness.Incomplete incomplete) {
                return reply.put("status", "incomplete").put("indent", incomplete.indent());
            }
            return reply.put("status", found instanceof Completeness.Invalid ? "invalid" : "complete");
        });
    }

    /** Answers {@code complete_request}. */
    Handler complete() {
        return withEngine((content, cells) -> {
            String code = content.text("code");
            Completions found = cells.complete(code, cursor(content, code));
            int start = CodePoints.fromUtf16(code, found.start());
            int end = CodePoints.fromUtf16(code, found.end());
            ObjectNode reply = Replies.ok();
            ArrayNode matches = reply.putArray("matches");
            ArrayNode types = reply.putObject("metadata").putArray("_jupyter_types_experimental");
            for (Completions.Match match : found.matches()) {
                matches.add(match.text());
                types.addObject()
                        .put("start", start)
                        .put("end", end)
                        .put("text", match.text())
                        .put("type", match.type());
            }
            return reply.put("cursor_start", start).put("cursor_end", end);
        });
    }

    /** Answers {@code inspect_request}. */
    Handler inspect() {
        return withEngine((content, cells) -> {
            String code = content.text("code");
            int level = content.integer("detail_level").orElse(0);
            MimeBundle found = cells.inspect(
                    code, cursor(content, code), level > 0 ? CellEngine.Detail.FULL : CellEngine.Detail.SIGNATURE);
            boolean isFound = !found.plainText().isEmpty();
            ObjectNode reply = Replies.ok().put("found", isFound);
            if (isFound) {
                Replies.putBundle(reply, found);
            } else {
                reply.putObject("data");
                reply.putObject("metadata");
            }
            return reply;
        });
    }

    private static int cursor(Content content, String code) {
        return CodePoints.toUtf16(code, content.integer("cursor_pos").orElse(Integer.MAX_VALUE));
    }

    private Handler withEngine(Question question) {
        return request -> {
            try {
                return Optional.of(question.answer(request.content(), engine.await()));
            } catch (EngineGate.NoEngineException e) {
                return Optional.of(Replies.error(e.kind(), e.text()));
            } catch (InterruptedException e) {
                Thread.currentThread().interrupt();
                return Optional.of(Replies.error("ShuttingDown", "The kernel is shutting down."));
            }
        };
    }

    @FunctionalInterface
    private interface Question {
        ObjectNode answer(Content content, CellEngine cells);
    }
}
