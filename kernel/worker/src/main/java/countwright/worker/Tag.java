package countwright.worker;

/** What the first byte of a frame, a fault or a value says. */
final class Tag {
    static final int LOAD = 1;
    static final int INVOKE = 2;
    static final int READ_VARIABLE = 3;
    static final int ADD_TO_CLASS_PATH = 4;
    static final int INTERRUPT = 5;
    static final int ANSWER = 6;
    static final int REFUSE = 7;
    static final int LEAVE = 8;
    static final int RELEASE = 9;
    static final int COMM_RECEIVED = 10;
    static final int INTERRUPT_HANDLER = 11;
    static final int READY = 16;
    static final int DONE = 17;
    static final int FAILED = 18;
    static final int OUTPUT = 19;
    static final int SHOWN = 20;
    static final int UPDATED = 21;
    static final int CLEARED = 22;
    static final int ASKED = 23;
    static final int CELL_STARTED = 40;
    static final int CLOSE_AWAITED = 41;
    static final int RESTORE_ASKED = 42;
    static final int STOP_WHEN_SPEAKING = 43;
    static final int PAGED = 24;
    static final int NEXT_INPUT = 25;
    static final int COMM_SENT = 26;
    static final int ASIDE = 27;
    static final int HANDLED = 28;
    static final int THROWN = 1;
    static final int UNRESOLVED = 2;
    static final int STOPPED = 3;
    static final int NOT_INSTALLED = 4;
    static final int INTERNAL = 5;
    static final int WHOLE = 1;
    static final int DECIMAL = 2;
    static final int FLAG = 3;
    static final int TEXT = 4;
    static final int LIST = 5;
    static final int OBJECT = 6;
    static final int NOTHING = 7;

    private Tag() {}
}
