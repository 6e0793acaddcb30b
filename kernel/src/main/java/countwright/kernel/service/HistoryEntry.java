package countwright.kernel.service;

import java.util.Optional;

/** One cell that was run: the number of its session, its own number in it, its code, and the text of its result. */
record HistoryEntry(int session, int line, String input, Optional<String> output) {}
