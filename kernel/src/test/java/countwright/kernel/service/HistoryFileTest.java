package countwright.kernel.service;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.nio.file.attribute.PosixFilePermissions;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.Callable;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.DisabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

class HistoryFileTest {

    @TempDir
    private Path folder = Path.of("");

    @Test
    void appended_isReadAsItWas() throws IOException {
        HistoryFile file = new HistoryFile(path());
        HistoryEntry first = entry(file.claimSession(), 1, "int x = 1;\n\"é 🚋\\\"\"");
        HistoryEntry second = new HistoryEntry(1, 2, "x", Optional.of("1"));
        file.append(first);
        file.append(second);

        assertThat(new HistoryFile(path()).read()).containsExactly(first, second);
    }

    @Test
    void noFileYet_isEmpty() throws IOException {
        assertThat(new HistoryFile(path()).read()).isEmpty();
    }

    @Test
    @DisabledOnOs(value = OS.WINDOWS, disabledReason = "has no such permissions")
    void files_areTheirOwnersAlone() throws IOException {
        HistoryFile file = new HistoryFile(path());
        file.append(entry(file.claimSession(), 1, "x"));

        assertThat(Files.getPosixFilePermissions(path().getParent()))
                .isEqualTo(PosixFilePermissions.fromString("rwx------"));
        try (var files = Files.list(path().getParent())) {
            assertThat(files.toList())
                    .hasSize(2)
                    .allSatisfy(each -> assertThat(Files.getPosixFilePermissions(each))
                            .isEqualTo(PosixFilePermissions.fromString("rw-------")));
        }
    }

    @Test
    void lineCutShortByACrash_costsOnlyItself() throws IOException {
        HistoryFile file = new HistoryFile(path());
        file.append(entry(file.claimSession(), 1, "before"));
        Files.writeString(path(), "{\"session\":1,\"line\":2,\"inp", StandardOpenOption.APPEND);
        assertThat(file.read()).extracting(HistoryEntry::input).containsExactly("before");

        file.append(entry(1, 3, "after"));

        assertThat(file.read()).extracting(HistoryEntry::input).containsExactly("before", "after");
    }

    @Test
    void noise_isSkipped() throws IOException {
        HistoryFile file = new HistoryFile(path());
        file.append(entry(file.claimSession(), 1, "before"));
        Files.write(
                path(), new byte[] {'\n', (byte) 0xff, 0, '{', '\n', '7', '\n', '[', '\n'}, StandardOpenOption.APPEND);
        Files.writeString(path(), "{\"session\":\"1\",\"line\":2,\"input\":3}\n", StandardOpenOption.APPEND);
        file.append(entry(1, 3, "after"));

        assertThat(file.read()).extracting(HistoryEntry::input).containsExactly("before", "after");
    }

    @Test
    void largeFile_keepsItsNewerHalf() throws IOException {
        HistoryFile file = new HistoryFile(path(), 10_000);
        int session = file.claimSession();
        for (int line = 1; line <= 1_000; line++) {
            file.append(entry(session, line, "cell " + line));
        }

        assertThat(Files.size(path())).isLessThanOrEqualTo(10_000);
        List<HistoryEntry> kept = file.read();
        assertThat(kept).hasSizeGreaterThan(80);
        assertThat(kept.get(kept.size() - 1).line()).isEqualTo(1_000);
        assertThat(kept.get(0).line()).isEqualTo(1_000 - kept.size() + 1);
    }

    @Test
    void severalAtOnce_haveNumbersOfTheirOwnAndLoseNothing() throws Exception {
        ExecutorService threads = Executors.newFixedThreadPool(4);
        try {
            List<Future<Integer>> sessions = new ArrayList<>();
            for (int i = 0; i < 4; i++) {
                Callable<Integer> kernel = () -> {
                    HistoryFile file = new HistoryFile(path());
                    int session = file.claimSession();
                    for (int line = 1; line <= 100; line++) {
                        file.append(entry(session, line, "cell"));
                    }
                    return session;
                };
                sessions.add(threads.submit(kernel));
            }
            List<Integer> numbers = new ArrayList<>();
            for (Future<Integer> session : sessions) {
                numbers.add(session.get());
            }
            assertThat(numbers).containsExactlyInAnyOrder(1, 2, 3, 4);
            assertThat(new HistoryFile(path()).read()).hasSize(400);
        } finally {
            threads.shutdownNow();
        }
    }

    @Test
    void lostNumber_isFoundAgainInTheFile() throws IOException {
        HistoryFile file = new HistoryFile(path());
        file.claimSession();
        file.append(entry(41, 1, "x"));
        Files.writeString(path().resolveSibling("history.jsonl.lock"), "what", StandardCharsets.US_ASCII);

        assertThat(file.claimSession()).isEqualTo(42);
        assertThat(file.claimSession()).isEqualTo(43);
    }

    @Test
    void folderThatIsAFile_isRefused() throws IOException {
        Files.writeString(folder.resolve("data"), "in the way");

        assertThatThrownBy(() -> new HistoryFile(path()).claimSession()).isInstanceOf(IOException.class);
    }

    @Test
    void place_followsTheSystemAndTheUser() {
        Path home = folder.resolve("home").toAbsolutePath();
        Path data = folder.resolve("elsewhere").toAbsolutePath();
        Path name = Path.of("countwright", "history.jsonl");

        assertThat(HistoryPlace.of(Map.of(), "Linux", home))
                .contains(home.resolve(".local/share").resolve(name));
        assertThat(HistoryPlace.of(Map.of("XDG_DATA_HOME", data.toString()), "Linux", home))
                .contains(data.resolve(name));
        assertThat(HistoryPlace.of(Map.of("XDG_DATA_HOME", "relative"), "Linux", home))
                .contains(home.resolve(".local/share").resolve(name));
        assertThat(HistoryPlace.of(Map.of(), "Mac OS X", home))
                .contains(home.resolve("Library/Application Support").resolve(name));
        assertThat(HistoryPlace.of(Map.of("APPDATA", data.toString()), "Windows 11", home))
                .contains(data.resolve(name));
        assertThat(HistoryPlace.of(Map.of("COUNTWRIGHT_HISTORY", "OFF"), "Linux", home))
                .isEmpty();
        assertThat(HistoryPlace.of(Map.of("COUNTWRIGHT_HISTORY", data.toString()), "Linux", home))
                .contains(data);
    }

    private Path path() {
        return folder.resolve("data").resolve("history.jsonl");
    }

    private static HistoryEntry entry(int session, int line, String input) {
        return new HistoryEntry(session, line, input, Optional.empty());
    }
}
