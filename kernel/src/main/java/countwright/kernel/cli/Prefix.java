package countwright.kernel.cli;

import java.nio.file.Path;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Option;

/** The option that says where the kernelspec is. */
final class Prefix {

    @Option(
            names = "--prefix",
            paramLabel = "DIR",
            description =
                    "The installation to register with, such as a virtual environment: DIR/share/jupyter/kernels. "
                            + "Default: the user's own Jupyter data folder.")
    private @Nullable Path folder;

    KernelSpec kernelSpec() {
        return KernelSpec.below(Optional.ofNullable(folder)
                .map(KernelSpecHome::underPrefix)
                .orElseGet(() -> KernelSpecHome.ofThisUser().perUser()));
    }
}
