package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/** The shipped list, reconstructed. */
@Command(
        name = "demo",
        description = "Reconstructs the list that comes with the sources: rods, a warm background, a cold insert.")
final class DemoVerb extends Verb {
    @Option(
            names = "--out",
            paramLabel = "DIR",
            defaultValue = "demo",
            description = "Folder for the results. Default: ${DEFAULT-VALUE}.")
    private Path out;

    DemoVerb() {}

    @Override
    void run() throws IOException {
        Path plan = Path.of(System.getProperty("raysheaf.home", "."), "sample-data", "reconstructions", "demo.yaml");
        if (!Files.exists(plan)) {
            throw new IOException(plan + " is not there; start the demo with recon/raysheaf from a checkout");
        }
        common().note(
                        "A list of about 400,000 coincidences, simulated for the invented scanner heron-12, becomes an image.");
        common().note("The detector's response is worked out first; that takes longest and is kept for the next time.");
        ReconstructVerb.reconstruct(
                common(), RunRequest.of(plan, null, null, true, common().lanes()), out, null, false);
    }
}
