package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.ray.NoUsableEventsException;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.phantom.Phantom;
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
        ReconstructionInput found = ReconstructionInput.of(input, with, common);
        ForkJoinPool pool = common.pool();
        Reconstruction done;
        try {
            ReconstructionPlan plan = found.plan().with(common.lanes(), halves);
            done = Reconstruction.of(found.list(), plan, found.base(), common, pool);
        } catch (NoUsableEventsException e) {
            throw new IOException(nothingUsable(found.list(), e.tally()), e);
        }
        Figures figures = Figures.of(done);
        Calibration calibration = known == null
                ? null
                : Calibration.of(
                        done.whole().image(),
                        known,
                        0.5 * done.systems().system().fieldOfView().lengthMm(),
                        done.systems().system().description().name());
        Map<String, Object> results = folder.write(done, figures, calibration, pool.getParallelism());
        common.print(results, folder.lines(done, figures));
    }

    private static String nothingUsable(Path list, EventTally tally) {
        String trouble = tally.used() > 0
                ? "too few events for images of the odd and of the even ones; leave out halves"
                : "no event can be used, so there is no image";
        return list + ": " + trouble + "\n" + String.join("\n", new Accounting(tally).lines());
    }
}
