package countwright.kernel.cli;

import countwright.kernel.desk.ArchiveMaking;
import countwright.kernel.desk.DeskException;
import countwright.kernel.desk.KernelCommand;
import countwright.kernel.worker.ClassArchives;
import java.io.PrintWriter;
import java.util.concurrent.Callable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.Spec;

/** Makes the kernel known to notebook front ends. */
@Command(
        name = "register",
        description = "Make this kernel known to notebook front ends. A second time replaces the first.",
        mixinStandardHelpOptions = true)
final class RegisterCommand implements Callable<Integer> {

    @Mixin
    private Prefix prefix = new Prefix();

    @Option(
            names = "--without-archives",
            description = "Do not prepare the class-data archives by which kernels start quicker.")
    private boolean withoutArchives;

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
        PrintWriter out = spec.commandLine().getOut();
        out.println(verb + " the kernel '" + KernelSpec.DISPLAY_NAME + "' in " + kernelSpec.folder());
        out.flush();
        if (!withoutArchives) {
            ClassArchives.ofInstallation().ifPresent(archives -> prepare(archives, out));
        }
        return Main.DONE;
    }

    /** The kernel is registered and works; that it could start quicker is no reason to fail. */
    private static void prepare(ClassArchives archives, PrintWriter out) {
        out.println("Preparing class-data archives, so that kernels start quicker; this takes half a minute ...");
        out.flush();
        try {
            new ArchiveMaking(archives).make();
            out.println("They are in " + archives.folder()
                    + ", may be deleted at any time, and are made anew by 'register'.");
        } catch (DeskException e) {
            out.println("Left out: " + e.getMessage() + ". Kernels start without them, only slower.");
        }
    }
}
