package countwright.kernel.cli;

import countwright.kernel.desk.ArchiveMaking;
import countwright.kernel.worker.ClassArchives;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Spec;

/** Takes back what {@code register} did. */
@Command(
        name = "unregister",
        description = "Take back what 'register' did, with the same --prefix. Nothing else is removed.",
        mixinStandardHelpOptions = true)
final class UnregisterCommand implements Callable<Integer> {

    @Mixin
    private Prefix prefix = new Prefix();

    @Spec
    private @Nullable CommandSpec spec;

    @Override
    public Integer call() {
        if (spec == null) {
            throw new IllegalStateException("the command line has not been set up.");
        }
        KernelSpec kernelSpec = prefix.kernelSpec();
        String said;
        if (kernelSpec.exists()) {
            kernelSpec.remove();
            said = "Removed the kernel from " + kernelSpec.folder();
        } else {
            said = "The kernel is not registered in " + kernelSpec.folder() + "; nothing to remove.";
        }
        spec.commandLine().getOut().println(said);
        // Another registration may still use them, but they cost only time when they are gone.
        ClassArchives.ofInstallation().map(ArchiveMaking::new).ifPresent(ArchiveMaking::remove);
        return Main.DONE;
    }
}
