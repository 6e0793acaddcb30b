package countwright.kernel.service;

import countwright.kernel.wire.JsonText;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.charset.StandardCharsets;
import java.nio.file.FileSystems;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.StandardOpenOption;
import java.nio.file.attribute.FileAttribute;
import java.nio.file.attribute.PosixFilePermissions;
import java.util.ArrayList;
import java.util.Collections;
import java.util.HashSet;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import java.util.concurrent.TimeUnit;
import tools.jackson.core.JacksonException;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.node.ObjectNode;

/**
 * The file in which cells are kept: one JSON object a line, appended and handed to the system cell by cell, so that a
 * crash loses at most the last. A line that a crash has cut short is skipped when reading and ended when appending.
 *
 * <p>Several kernels may use one file. A second file beside it holds the number of the last session and is locked for
 * each change. When the file has grown beyond a bound, the newer half of it takes its place.
 */
final class HistoryFile {

    private static final long LARGEST_BYTES = 8L << 20;
    private static final long LOCK_MILLIS = 2_000;
    private static final long LOCK_RETRY_MILLIS = 10;

    /** The system's lock is for processes; kernels in one process, as in tests, need this one as well. */
    private static final Object IN_THIS_PROCESS = new Object();

    private static final boolean POSIX =
            FileSystems.getDefault().supportedFileAttributeViews().contains("posix");

    private final Path file;
    private final Path lockFile;
    private final long largestBytes;

    HistoryFile(Path file) {
        this(file, LARGEST_BYTES);
    }

    HistoryFile(Path file, long largestBytes) {
        this.file = file;
        this.lockFile = file.resolveSibling(file.getFileName() + ".lock");
        this.largestBytes = largestBytes;
    }

    /**
     * Takes a number for a new session, larger than any before.
     *
     * @throws IOException if the files cannot be written, or another process does not give them free
     */
    int claimSession() throws IOException {
        createFolder();
        return locked(lock -> {
            int next = lastSession(lock) + 1;
            lock.truncate(0);
            lock.write(ByteBuffer.wrap(Integer.toString(next).getBytes(StandardCharsets.US_ASCII)), 0);
            return next;
        });
    }

    /**
     * Appends a cell.
     *
     * @throws IOException if the file cannot be written, or another process does not give it free
     */
    void append(HistoryEntry entry) throws IOException {
        byte[] line = (encode(entry) + "\n").getBytes(StandardCharsets.UTF_8);
        locked(lock -> {
            try (FileChannel channel = open(file, StandardOpenOption.APPEND)) {
                long size = channel.size();
                ByteBuffer record = ByteBuffer.allocate(line.length + 1);
                if (size > 0 && !endsWithLineBreak(size)) {
                    record.put((byte) '\n');
                }
                record.put(line).flip();
                while (record.hasRemaining()) {
                    channel.write(record);
                }
                if (size + line.length > largestBytes) {
                    keepNewerHalf();
                }
            }
            return line.length;
        });
    }

    /**
     * Returns all cells in the order in which they were written; none if there is no file yet.
     *
     * @throws IOException if the file cannot be read
     */
    List<HistoryEntry> read() throws IOException {
        List<HistoryEntry> entries = new ArrayList<>();
        for (String line : lines()) {
            decode(line).ifPresent(entries::add);
        }
        return entries;
    }

    private List<String> lines() throws IOException {
        try {
            // Decoded leniently: damage to one line must not cost the others.
            return new String(Files.readAllBytes(file), StandardCharsets.UTF_8)
                    .lines()
                    .toList();
        } catch (NoSuchFileException e) {
            return List.of();
        }
    }

    private boolean endsWithLineBreak(long size) throws IOException {
        ByteBuffer last = ByteBuffer.allocate(1);
        try (FileChannel reading = FileChannel.open(file, StandardOpenOption.READ)) {
            reading.read(last, size - 1);
        }
        return last.get(0) == '\n';
    }

    private void keepNewerHalf() throws IOException {
        List<String> lines = lines();
        List<String> kept = new ArrayList<>();
        long bytes = 0;
        for (int i = lines.size() - 1; i >= 0 && bytes < largestBytes / 2; i--) {
            kept.add(lines.get(i));
            bytes += lines.get(i).getBytes(StandardCharsets.UTF_8).length + 1;
        }
        Collections.reverse(kept);
        Path newer = file.resolveSibling(file.getFileName() + ".new");
        Files.deleteIfExists(newer);
        try (FileChannel channel = open(newer, StandardOpenOption.WRITE)) {
            ByteBuffer content = ByteBuffer.wrap((String.join("\n", kept) + "\n").getBytes(StandardCharsets.UTF_8));
            while (content.hasRemaining()) {
                channel.write(content);
            }
        }
        Files.move(newer, file, StandardCopyOption.ATOMIC_MOVE, StandardCopyOption.REPLACE_EXISTING);
    }

    private int lastSession(FileChannel lock) throws IOException {
        ByteBuffer content = ByteBuffer.allocate(16);
        lock.read(content, 0);
        String text = new String(content.array(), 0, content.position(), StandardCharsets.US_ASCII).strip();
        if (text.matches("[0-9]{1,9}")) {
            return Integer.parseInt(text);
        }
        // The number is lost: it is at least the largest that stands in the file.
        return read().stream().mapToInt(HistoryEntry::session).max().orElse(0);
    }

    @FunctionalInterface
    private interface Change {
        int make(FileChannel lock) throws IOException;
    }

    private int locked(Change change) throws IOException {
        synchronized (IN_THIS_PROCESS) {
            try (FileChannel channel = open(lockFile, StandardOpenOption.WRITE, StandardOpenOption.READ)) {
                // Given free with the channel.
                lock(channel);
                return change.make(channel);
            }
        }
    }

    /** A process that was stopped while it held the lock must not hold up this one for ever. */
    private void lock(FileChannel channel) throws IOException {
        long deadline = System.nanoTime() + TimeUnit.MILLISECONDS.toNanos(LOCK_MILLIS);
        try {
            while (channel.tryLock() == null) {
                if (System.nanoTime() > deadline) {
                    throw new IOException("another process holds " + lockFile);
                }
                Thread.sleep(LOCK_RETRY_MILLIS);
            }
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
            throw new IOException("interrupted while waiting for " + lockFile, e);
        }
    }

    private void createFolder() throws IOException {
        Path folder = Optional.ofNullable(file.getParent()).orElse(Path.of(""));
        if (Files.isDirectory(folder)) {
            return;
        }
        Files.createDirectories(folder, ownerOnly("rwx------"));
    }

    /** Opens a file, or creates it so that only its owner can read it: cells may hold what is nobody else's business. */
    private static FileChannel open(Path path, StandardOpenOption... options) throws IOException {
        Set<StandardOpenOption> all = new HashSet<>(List.of(options));
        all.add(StandardOpenOption.CREATE);
        return FileChannel.open(path, all, ownerOnly("rw-------"));
    }

    private static FileAttribute<?>[] ownerOnly(String permissions) {
        return POSIX
                ? new FileAttribute<?>[] {
                    PosixFilePermissions.asFileAttribute(PosixFilePermissions.fromString(permissions))
                }
                : new FileAttribute<?>[0];
    }

    private static String encode(HistoryEntry entry) {
        ObjectNode json = Replies.object();
        json.put("session", entry.session());
        json.put("line", entry.line());
        json.put("input", entry.input());
        entry.output().ifPresent(output -> json.put("output", output));
        return JsonText.standard().write(json);
    }

    private static Optional<HistoryEntry> decode(String line) {
        JsonNode json;
        try {
            json = JsonText.standard().read(line);
        } catch (JacksonException cutShort) {
            return Optional.empty();
        }
        JsonNode session = json.path("session");
        JsonNode number = json.path("line");
        JsonNode input = json.path("input");
        if (!session.isInt() || !number.isInt() || !input.isString()) {
            return Optional.empty();
        }
        return Optional.of(new HistoryEntry(
                session.intValue(),
                number.intValue(),
                input.stringValue(),
                json.path("output").isString() ? Optional.of(json.path("output").stringValue()) : Optional.empty()));
    }
}
