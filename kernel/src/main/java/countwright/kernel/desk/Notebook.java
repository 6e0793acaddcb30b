package countwright.kernel.desk;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.AccessDeniedException;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.util.List;
import tools.jackson.databind.node.ObjectNode;

/**
 * A notebook file: cells in order, and metadata. Immutable.
 *
 * <p>Any minor revision of format 4 is read, and what a newer one adds is passed over; revision 4.5 is written. Source:
 * the Jupyter notebook format, version 4.5.
 */
public final class Notebook {

    private final ObjectNode metadata;
    private final List<Cell> cells;

    Notebook(ObjectNode metadata, List<Cell> cells) {
        this.metadata = metadata;
        this.cells = List.copyOf(cells);
    }

    /**
     * Reads a notebook file.
     *
     * @throws DeskException if it cannot be read or is no notebook of format 4
     */
    public static Notebook read(Path file) {
        String json;
        try {
            json = Files.readString(file, StandardCharsets.UTF_8);
        } catch (NoSuchFileException e) {
            throw new DeskException("there is no notebook " + file + ". Check the name and the folder.", e);
        } catch (AccessDeniedException e) {
            throw new DeskException("no permission to read " + file + ".", e);
        } catch (IOException e) {
            throw new DeskException(
                    Files.isDirectory(file)
                            ? file + " is a folder. Name the notebook file in it."
                            : file + " cannot be read as UTF-8 text: " + e.getMessage(),
                    e);
        }
        return parse(json, file.toString());
    }

    /**
     * Reads a notebook from its JSON text.
     *
     * @param name what to call it in an error message
     * @throws DeskException if it is no notebook of format 4
     */
    public static Notebook parse(String json, String name) {
        return new NotebookReader(name).read(json);
    }

    /** Returns this notebook as JSON text of format 4.5, keys in alphabetical order, ending with a line end. */
    public String toJson() {
        return NotebookWriter.write(this);
    }

    /**
     * Writes this notebook to a file; a reader never sees half of it.
     *
     * @throws DeskException if the file cannot be written
     */
    public void write(Path file) {
        replaceFile(file, toJson());
    }

    /** Returns the number of code cells that have something to run. */
    public int countOfCodeCells() {
        return (int) cells.stream()
                .filter(cell -> cell instanceof Cell.Code code && !code.isBlank())
                .count();
    }

    ObjectNode metadata() {
        return metadata;
    }

    List<Cell> cells() {
        return cells;
    }

    Notebook with(ObjectNode newMetadata, List<Cell> newCells) {
        return new Notebook(newMetadata, newCells);
    }

    static void replaceFile(Path file, String text) {
        Path part = file.resolveSibling(file.getFileName() + ".part");
        try {
            Files.writeString(part, text, StandardCharsets.UTF_8);
            Files.move(part, file, StandardCopyOption.REPLACE_EXISTING);
        } catch (AccessDeniedException e) {
            throw new DeskException("no permission to write " + file + ". Choose another folder with --output.", e);
        } catch (IOException e) {
            throw new DeskException("cannot write " + file + ": " + e, e);
        }
    }
}
