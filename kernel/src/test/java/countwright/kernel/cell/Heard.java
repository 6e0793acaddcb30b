package countwright.kernel.cell;

import countwright.show.CommMessage;
import countwright.show.MimeBundle;
import countwright.show.Stage;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import java.util.function.Consumer;

/** A listener that remembers what it hears, and answers questions as it is told to. */
final class Heard implements CellListener {

    private final StringBuilder out = new StringBuilder();
    private final StringBuilder err = new StringBuilder();
    private final List<MimeBundle> shown = new ArrayList<>();
    private final List<CommMessage> comms = new ArrayList<>();
    private final CountDownLatch something = new CountDownLatch(1);
    private final Consumer<InputRequest> onQuestion;

    Heard() {
        this(request -> request.refuse("nobody is there"));
    }

    Heard(Consumer<InputRequest> onQuestion) {
        this.onQuestion = onQuestion;
    }

    synchronized String out() {
        return out.toString();
    }

    synchronized String err() {
        return err.toString();
    }

    synchronized List<MimeBundle> shown() {
        return List.copyOf(shown);
    }

    boolean awaitSomething() throws InterruptedException {
        return something.await(20, TimeUnit.SECONDS);
    }

    @Override
    public synchronized void output(Stream stream, String text) {
        (stream == Stream.OUT ? out : err).append(text);
        something.countDown();
    }

    @Override
    public synchronized void display(MimeBundle bundle, Optional<String> displayId) {
        shown.add(bundle);
        something.countDown();
    }

    @Override
    public synchronized void update(MimeBundle bundle, String displayId) {
        shown.add(bundle);
    }

    @Override
    public synchronized void clear(Stage.Clearing when) {
        shown.clear();
    }

    @Override
    public void ask(InputRequest request) {
        onQuestion.accept(request);
    }

    @Override
    public synchronized void page(MimeBundle bundle) {
        shown.add(bundle);
    }

    @Override
    public void nextInput(String code) {}

    @Override
    public synchronized void comm(CommMessage message) {
        comms.add(message);
        notifyAll();
    }

    /** Waits for the next comm message and takes it. */
    synchronized CommMessage takeComm() throws InterruptedException {
        long deadline = System.nanoTime() + TimeUnit.SECONDS.toNanos(20);
        while (comms.isEmpty()) {
            long left = TimeUnit.NANOSECONDS.toMillis(deadline - System.nanoTime());
            if (left <= 0) {
                throw new AssertionError("no comm message within 20 s");
            }
            wait(left);
        }
        return comms.remove(0);
    }
}
