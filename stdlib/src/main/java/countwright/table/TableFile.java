package countwright.table;

import countwright.show.NearNames;
import java.io.IOException;
import java.nio.file.FileSystems;
import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;

/** A file that is there, may be read, and is of a kind we can read. */
record TableFile(Path path, FileFormat format) {

    /**
     * Finds a file by the path a person gave, relative to the working folder.
     *
     * @throws IllegalArgumentException if it is not there (naming what is), is a folder, or is of an unknown kind
     */
    static TableFile find(String given) {
        if (given.isBlank()) {
            throw new IllegalArgumentException("the path of the file to read is blank. Name a file, such as "
                    + "Table.read(\"data/faults.csv\").");
        }
        if (given.matches("(?i)[a-z][a-z0-9+]+://.*")) {
            throw new IllegalArgumentException("'" + given + "' is a web address, and Table.read takes files on this"
                    + " computer only. Download it first, then give the path of the file.");
        }
        try {
            return find(given, Path.of(given));
        } catch (InvalidPathException e) {
            throw new IllegalArgumentException("'" + given + "' is not a path: " + e.getReason() + ".", e);
        }
    }

    static TableFile find(Path given) {
        return find(given.toString(), given);
    }

    private static TableFile find(String given, Path asPath) {
        Path path = asPath.toAbsolutePath().normalize();
        if (!path.getFileSystem().equals(FileSystems.getDefault())) {
            throw new IllegalArgumentException("'" + given + "' is not in the file system of this computer ("
                    + path.getFileSystem().provider().getScheme() + "). Copy it to a file first.");
        }
        if (Files.isDirectory(path)) {
            throw new IllegalArgumentException(
                    "'" + given + "' is a folder, not a file. " + contents(path) + " Name one of its files.");
        }
        if (!Files.exists(path)) {
            throw new IllegalArgumentException(missing(given, path));
        }
        if (!Files.isReadable(path)) {
            throw new IllegalArgumentException("the file '" + given + "' (" + path
                    + ") is there, but may not be read. Change its permissions or copy it.");
        }
        FileFormat format = FileFormat.of(name(path))
                .orElseThrow(() -> new IllegalArgumentException("cannot tell how to read '" + given
                        + "' from the end of its name. Table.read takes " + FileFormat.ENDINGS
                        + ". Save the data as one of these, or rename the file to what it is."));
        return new TableFile(path, format);
    }

    /** Returns the last part of the path, which stands for the file in messages. */
    String name() {
        return name(path);
    }

    private static String name(Path path) {
        Path last = path.getFileName();
        return last == null ? path.toString() : last.toString();
    }

    private static String missing(String given, Path path) {
        Path folder = path.getParent();
        if (folder == null) {
            return "no file '" + given + "'.";
        }
        if (!Files.isDirectory(folder)) {
            Path nearest = folder;
            while (nearest.getParent() != null && !Files.isDirectory(nearest)) {
                nearest = nearest.getParent();
            }
            return "no file '" + given + "': there is no folder " + folder + ". " + contents(nearest)
                    + " Correct the path; it counts from the working folder "
                    + Path.of("").toAbsolutePath() + ".";
        }
        String question = NearNames.question(name(path), fileNames(folder));
        return "no file '" + given + "': looked for '" + name(path) + "' in " + folder + ". "
                + (question.isEmpty() ? contents(folder) : question)
                + " Correct the path; it counts from the working folder "
                + Path.of("").toAbsolutePath() + ".";
    }

    private static String contents(Path folder) {
        List<String> names = fileNames(folder);
        return names.isEmpty()
                ? "The folder " + folder + " is empty."
                : "The folder " + folder + " holds " + NearNames.list(names) + ".";
    }

    /** Returns the names in a folder, files that can be read first; none if the folder may not be listed. */
    private static List<String> fileNames(Path folder) {
        try (Stream<Path> entries = Files.list(folder)) {
            List<String> names = entries.map(entry -> name(entry) + (Files.isDirectory(entry) ? "/" : ""))
                    .filter(name -> !name.startsWith("."))
                    .sorted()
                    .toList();
            Stream<String> readable =
                    names.stream().filter(name -> FileFormat.of(name).isPresent());
            Stream<String> others =
                    names.stream().filter(name -> FileFormat.of(name).isEmpty());
            return Stream.concat(readable, others).toList();
        } catch (IOException e) {
            return List.of();
        }
    }
}
