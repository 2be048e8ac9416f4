package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.ray.NoUsableEventsException;
import org.raysheaf.geometry.event.EventTally;
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

    ReconstructVerb() {}

    @Override
    void run() throws IOException {
        reconstruct(common(), input, with, out, halves);
    }

    static void reconstruct(Common common, Path input, @Nullable Path with, Path out, boolean halves)
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
        Map<String, Object> results = folder.write(done, figures, pool.getParallelism());
        common.print(results, folder.lines(done, figures));
    }

    private static String nothingUsable(Path list, EventTally tally) {
        String trouble = tally.used() > 0
                ? "too few events for images of the odd and of the even ones; leave out halves"
                : "no event can be used, so there is no image";
        return list + ": " + trouble + "\n" + String.join("\n", new Accounting(tally).lines());
    }
}
