package countwright.worker;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.ArrayBlockingQueue;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.atomic.AtomicInteger;

/** The stage of a session: shows and asks through the kernel. */
final class StageChannel implements Stage {

    private final Outbox outbox;
    private final AtomicInteger questions = new AtomicInteger();
    private final Map<Integer, BlockingQueue<Frame.ToWorker>> waiting = new ConcurrentHashMap<>();

    private volatile int restorable;

    StageChannel(Outbox outbox) {
        this.outbox = outbox;
    }

    @Override
    public void display(MimeBundle bundle) {
        outbox.putWhenRoom(new Frame.Shown(CellThread.checkSize(bundle), Optional.empty()));
    }

    @Override
    public void display(MimeBundle bundle, String displayId) {
        outbox.putWhenRoom(new Frame.Shown(CellThread.checkSize(bundle), Optional.of(displayId)));
    }

    @Override
    public void update(MimeBundle bundle, String displayId) {
        outbox.putWhenRoom(new Frame.Updated(CellThread.checkSize(bundle), displayId));
    }

    @Override
    public void clear(Clearing when) {
        outbox.putWhenRoom(new Frame.Cleared(when));
    }

    @Override
    public void page(MimeBundle bundle) {
        outbox.putWhenRoom(new Frame.Paged(CellThread.checkSize(bundle)));
    }

    @Override
    public void nextInput(String code) {
        outbox.putWhenRoom(new Frame.NextInput(code));
    }

    @Override
    public void send(CommMessage message) {
        outbox.putWhenRoom(new Frame.CommSent(message));
    }

    @Override
    public String ask(String prompt, Echo echo) {
        int question = questions.incrementAndGet();
        BlockingQueue<Frame.ToWorker> reply = new ArrayBlockingQueue<>(1);
        waiting.put(question, reply);
        try {
            outbox.putWhenRoom(new Frame.Asked(question, prompt, echo));
            Frame.ToWorker frame = reply.take();
            if (frame instanceof Frame.Refuse refuse) {
                throw new IllegalStateException(refuse.reason());
            }
            return ((Frame.Answer) frame).line();
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new IllegalStateException("interrupted while waiting for input", e);
        } finally {
            waiting.remove(question);
        }
    }

    @Override
    public void restoreSession() {
        outbox.putWhenRoom(new Frame.RestoreAsked());
    }

    @Override
    public int restorableCells() {
        return restorable;
    }

    /** Takes note of how many cells of a lost session could be run again. */
    void restorable(int cells) {
        restorable = cells;
    }

    /** Passes on a reply; one that nobody waits for any more is dropped. */
    void reply(int question, Frame.ToWorker reply) {
        BlockingQueue<Frame.ToWorker> asked = waiting.get(question);
        if (asked != null) {
            var unused = asked.offer(reply);
        }
    }
}
