package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.io.description.DescriptionReader;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** From a list to an image. */
@Command(name = "reconstruct", description = "From a list to an activity image in kBq/mL, with numbers and a picture.")
final class ReconstructVerb extends Verb {
    @Parameters(
            paramLabel = "RECONSTRUCTION.yaml|LIST.h5",
            description = "A description that names a list, or a list itself.")
    private Path input;

    @Option(names = "--with", paramLabel = "RECONSTRUCTION.yaml", description = "How to reconstruct the list.")
    private @Nullable Path with;

    @Option(names = "--out", required = true, paramLabel = "DIR", description = "Folder for the results.")
    private Path out;

    @Option(names = "--halves", description = "Also the images of the odd and of the even events.")
    private boolean halves;

    @Option(
            names = "--reference",
            paramLabel = "PHANTOM.yaml",
            description =
                    "The list is of this uniform phantom of known activity: also write calibration.yaml, for later lists.")
    private @Nullable Path reference;

    ReconstructVerb() {}

    @Override
    void run() throws IOException {
        Phantom known = reference == null ? null : Phantoms.read(reference);
        reconstruct(common(), input, with, out, halves, known);
    }

    static void reconstruct(
            Common common, Path input, @Nullable Path with, Path out, boolean halves, @Nullable Phantom known)
            throws IOException {
        ResultFolder folder = new ResultFolder(out, common.replace());
        folder.requireFree();
        ReconstructionPlan plan = ReconstructionPlan.bare();
        Path base = with;
        Path list = input;
        if (input.toString().endsWith(".yaml")) {
            plan = DescriptionReader.read(input, "reconstruction", ReconstructionPlan.class);
            String named = plan.list();
            if (named == null) {
                throw new IOException(input + ": names no list; add a line \"list: LIST.h5\", or give the list itself");
            }
            list = input.resolveSibling(named);
            base = input;
        } else if (with != null) {
            plan = DescriptionReader.read(with, "reconstruction", ReconstructionPlan.class);
        } else {
            common.note(
                    "no description given: 20 passes, 1 subset (MLEM), no filter, voxels of half the crystal pitch over the field of view, in kBq/mL");
        }
        ForkJoinPool pool = common.pool();
        Reconstruction done = Reconstruction.of(list, plan.with(common.lanes(), halves), base, common, pool);
        Calibration calibration = known == null
                ? null
                : Calibration.of(
                        done.whole().image(),
                        known,
                        0.5 * done.systems().system().fieldOfView().lengthMm(),
                        done.systems().system().description().name());
        Map<String, Object> results = folder.write(done, calibration, pool.getParallelism());
        common.print(results, folder.lines(done));
    }
}
