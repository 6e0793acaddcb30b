package countwright.kernel.cli;

import countwright.kernel.desk.DeskException;
import countwright.kernel.desk.KernelCommand;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Spec;

/** Makes the kernel known to notebook front ends. */
@Command(
        name = "register",
        description = "Make this kernel known to notebook front ends. A second time replaces the first.",
        mixinStandardHelpOptions = true)
final class RegisterCommand implements Callable<Integer> {

    @Mixin
    private Prefix prefix = new Prefix();

    @Spec
    private @Nullable CommandSpec spec;

    @Override
    public Integer call() {
        if (spec == null) {
            throw new IllegalStateException("the command line has not been set up.");
        }
        KernelCommand command = KernelCommand.installedHome()
                .map(KernelCommand::installedIn)
                .orElseThrow(() -> new DeskException("only an installed kernel can be registered. "
                        + "Build the distribution and start its bin/countwright."));
        KernelSpec kernelSpec = prefix.kernelSpec();
        String verb = kernelSpec.exists() ? "Replaced" : "Registered";
        kernelSpec.write(command);
        spec.commandLine()
                .getOut()
                .println(verb + " the kernel '" + KernelSpec.DISPLAY_NAME + "' in " + kernelSpec.folder());
        return Main.DONE;
    }
}
