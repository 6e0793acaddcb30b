package countwright.kernel.cli;

import countwright.kernel.desk.DeskException;
import countwright.kernel.desk.KernelCommand;
import java.io.IOException;
import java.io.InputStream;
import java.nio.file.AccessDeniedException;
import java.nio.file.Files;
import java.nio.file.LinkOption;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.util.Comparator;
import java.util.List;
import java.util.stream.Stream;
import tools.jackson.core.JacksonException;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;
import tools.jackson.databind.node.ArrayNode;
import tools.jackson.databind.node.JsonNodeFactory;
import tools.jackson.databind.node.ObjectNode;

/**
 * The kernelspec, the folder by which front ends know this kernel: how to start it, its name and its logo.
 *
 * <p>It carries a mark of its own in {@code metadata}; a folder of the same name without the mark is somebody else's and
 * is left alone.
 */
final class KernelSpec {

    static final String NAME = "countwright";
    static final String DISPLAY_NAME = "Countwright (Java)";

    private static final List<String> LOGOS = List.of("logo-32x32.png", "logo-64x64.png", "logo-svg.svg");
    private static final JsonMapper JSON = JsonMapper.builder().build();

    private final Path kernels;
    private final Path folder;

    private KernelSpec(Path kernels) {
        this.kernels = kernels;
        this.folder = kernels.resolve(NAME);
    }

    /** Returns the kernelspec below a folder of kernelspecs, whether or not it is there yet. */
    static KernelSpec below(Path kernels) {
        return new KernelSpec(kernels.toAbsolutePath().normalize());
    }

    Path folder() {
        return folder;
    }

    boolean exists() {
        return Files.exists(folder, LinkOption.NOFOLLOW_LINKS);
    }

    /**
     * Writes the kernelspec; one that is there is replaced as a whole, so that a front end sees the old one or the new.
     *
     * @throws DeskException if the folder is somebody else's or cannot be written
     */
    void write(KernelCommand command) {
        refuseIfForeign("replaced");
        Path fresh =
                kernels.resolve("." + NAME + "-new-" + ProcessHandle.current().pid());
        Path stale =
                kernels.resolve("." + NAME + "-old-" + ProcessHandle.current().pid());
        try {
            Files.createDirectories(kernels);
            remove(fresh);
            Files.createDirectory(fresh);
            Files.writeString(fresh.resolve("kernel.json"), json(command));
            for (String logo : LOGOS) {
                copy(logo, fresh);
            }
            if (exists()) {
                Files.move(folder, stale, StandardCopyOption.ATOMIC_MOVE);
            }
            Files.move(fresh, folder, StandardCopyOption.ATOMIC_MOVE);
            remove(stale);
        } catch (AccessDeniedException e) {
            throw noPermission(e);
        } catch (IOException e) {
            throw new DeskException("the kernelspec could not be written to " + folder + ": " + e, e);
        }
    }

    /**
     * Removes the kernelspec.
     *
     * @throws DeskException if the folder is somebody else's or cannot be removed
     */
    void remove() {
        refuseIfForeign("removed");
        try {
            remove(folder);
        } catch (AccessDeniedException e) {
            throw noPermission(e);
        } catch (IOException e) {
            throw new DeskException("the kernelspec " + folder + " could not be removed: " + e, e);
        }
    }

    private DeskException noPermission(AccessDeniedException cause) {
        return new DeskException(
                "no permission to write " + cause.getFile()
                        + ". Run without --prefix to register for yourself only, or choose a prefix of your own.",
                cause);
    }

    private void refuseIfForeign(String what) {
        if (exists() && !isOurs()) {
            throw new DeskException("the folder " + folder + " was not written by this program, so it is not " + what
                    + ". Look at it, and move it away if it is not needed.");
        }
    }

    private boolean isOurs() {
        try {
            JsonNode spec = JSON.readTree(Files.readString(folder.resolve("kernel.json")));
            return spec.path("metadata").path(NAME).isObject();
        } catch (IOException | JacksonException e) {
            return false;
        }
    }

    private static String json(KernelCommand command) {
        ObjectNode spec = JsonNodeFactory.instance.objectNode();
        ArrayNode argv = spec.putArray("argv");
        command.template().forEach(argv::add);
        spec.put("display_name", DISPLAY_NAME);
        spec.put("language", "java");
        spec.put("interrupt_mode", "message");
        ObjectNode metadata = spec.putObject("metadata");
        metadata.put("debugger", false);
        metadata.putObject(NAME).put("version", ProductVersion.current());
        return JSON.writerWithDefaultPrettyPrinter().writeValueAsString(spec) + "\n";
    }

    private static void copy(String logo, Path folder) throws IOException {
        try (InputStream in = KernelSpec.class.getResourceAsStream("kernelspec/" + logo)) {
            if (in == null) {
                throw new IllegalStateException(logo + " is missing from the kernel's jar; build it again.");
            }
            Files.copy(in, folder.resolve(logo));
        }
    }

    /** Removes a folder with all in it; a symbolic link is removed itself, never what it points to. */
    private static void remove(Path root) throws IOException {
        if (!Files.exists(root, LinkOption.NOFOLLOW_LINKS)) {
            return;
        }
        try (Stream<Path> tree = Files.walk(root)) {
            for (Path path : tree.sorted(Comparator.reverseOrder()).toList()) {
                Files.delete(path);
            }
        }
    }
}
