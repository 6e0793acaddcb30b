package countwright.kernel.cli;

import java.io.IOException;
import java.io.InputStream;
import java.util.Properties;
import picocli.CommandLine;

/** The version of this product, as the build wrote it into the jar. */
final class ProductVersion implements CommandLine.IVersionProvider {

    /** Written by the build, for the kernel's answers too. */
    private static final String RESOURCE = "/countwright/kernel/service/version.properties";

    @Override
    public String[] getVersion() {
        return new String[] {
            "Countwright " + current(),
            "Java " + System.getProperty("java.version") + " (" + System.getProperty("java.vendor") + ")"
        };
    }

    static String current() {
        Properties product = new Properties();
        try (InputStream in = ProductVersion.class.getResourceAsStream(RESOURCE)) {
            if (in != null) {
                product.load(in);
            }
        } catch (IOException e) {
            // A jar that cannot be read would not have got us here; the answer below is then the honest one.
        }
        return product.getProperty("version", "of unknown version");
    }
}
