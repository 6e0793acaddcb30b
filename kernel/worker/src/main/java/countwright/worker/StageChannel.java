package countwright.worker;

import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.atomic.AtomicInteger;

/** The stage of a session: shows and asks through the kernel. */
final class StageChannel implements Stage {

    private final Outbox outbox;
    private final AtomicInteger questions = new AtomicInteger();
    private final Map<Integer, CompletableFuture<String>> waiting = new ConcurrentHashMap<>();

    StageChannel(Outbox outbox) {
        this.outbox = outbox;
    }

    @Override
    public void display(MimeBundle bundle) {
        outbox.put(new Frame.Shown(CellThread.checkSize(bundle), Optional.empty()));
    }

    @Override
    public void display(MimeBundle bundle, String displayId) {
        outbox.put(new Frame.Shown(CellThread.checkSize(bundle), Optional.of(displayId)));
    }

    @Override
    public void update(MimeBundle bundle, String displayId) {
        outbox.put(new Frame.Updated(CellThread.checkSize(bundle), displayId));
    }

    @Override
    public void clear(Clearing when) {
        outbox.put(new Frame.Cleared(when));
    }

    @Override
    public String ask(String prompt, Echo echo) {
        int question = questions.incrementAndGet();
        CompletableFuture<String> answer = new CompletableFuture<>();
        waiting.put(question, answer);
        try {
            outbox.put(new Frame.Asked(question, prompt, echo));
            return answer.get();
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new IllegalStateException("interrupted while waiting for input", e);
        } catch (ExecutionException e) {
            throw new IllegalStateException(String.valueOf(e.getCause().getMessage()));
        } finally {
            waiting.remove(question);
        }
    }

    void answer(Frame.Answer answer) {
        CompletableFuture<String> asked = waiting.get(answer.question());
        if (asked != null) {
            asked.complete(answer.line());
        }
    }

    void refuse(Frame.Refuse refuse) {
        CompletableFuture<String> asked = waiting.get(refuse.question());
        if (asked != null) {
            asked.completeExceptionally(new IllegalStateException(refuse.reason()));
        }
    }
}
