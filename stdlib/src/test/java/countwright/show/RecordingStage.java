package countwright.show;

import java.util.List;

/** A stage that writes down in a line each what is done to it; every answer to a question is "answer". */
final class RecordingStage implements Stage {

    private final List<String> seen;

    RecordingStage(List<String> seen) {
        this.seen = seen;
    }

    @Override
    public void display(MimeBundle bundle) {
        seen.add("show " + bundle.plainText());
    }

    @Override
    public void display(MimeBundle bundle, String displayId) {
        seen.add("place " + bundle.plainText());
    }

    @Override
    public void update(MimeBundle bundle, String displayId) {
        seen.add("replace " + bundle.plainText());
    }

    @Override
    public void clear(Clearing when) {
        seen.add("clear " + when);
    }

    @Override
    public String ask(String prompt, Echo echo) {
        seen.add("ask " + echo + " " + prompt);
        return "answer";
    }

    @Override
    public void page(MimeBundle bundle) {
        seen.add("page " + bundle.plainText());
    }

    @Override
    public void nextInput(String code) {
        seen.add("next " + code);
    }

    @Override
    public void send(CommMessage message) {
        seen.add(message.kind() + " " + message.target() + " " + message.data());
    }
}
