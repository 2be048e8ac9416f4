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
            arity = "0..1",
            paramLabel = "RECONSTRUCTION.yaml|LIST.h5",
            description = "A description that names a list, or a list itself.")
    private @Nullable Path input;

    @Option(names = "--with", paramLabel = "RECONSTRUCTION.yaml", description = "How to reconstruct the list.")
    private @Nullable Path with;

    @Option(names = "--out", paramLabel = "DIR", description = "Folder for the results.")
    private @Nullable Path out;

    @Option(
            names = "--resume",
            paramLabel = "DIR",
            description =
                    "Go on with the reconstruction that was stopped in this folder; the result is the same, bit by bit.")
    private @Nullable Path resume;

    @Option(names = "--halves", description = "Also the images of the odd and of the even events.")
    private boolean halves;

    @Option(
            names = "--reference",
            paramLabel = "PHANTOM.yaml",
            description =
                    "The list is of this uniform phantom of known activity: also write calibration.yaml, for later lists.")
    private @Nullable Path reference;

    @Option(
            names = "--scratch",
            paramLabel = "DIR",
            description =
                    "Where to put events that do not fit into memory. Default: beside the folder for the results.")
    private @Nullable Path scratch;

    ReconstructVerb() {}

    @Override
    void run() throws IOException {
        Path folder = resume;
        if (folder != null) {
            if (input != null || with != null || out != null || halves || reference != null || common().lanes() > 0) {
                throw common().misused("--resume goes on with what was asked for then; leave out everything but"
                        + " --resume " + folder + ", --scratch, --threads, --cache and --json");
            }
            reconstruct(common(), WorkFolder.request(folder), folder, scratch, true);
        } else if (input == null) {
            throw common().misused("expected a reconstruction or a list, found neither; or go on with --resume DIR");
        } else if (out == null) {
            throw common().misused("expected --out DIR, a folder for the results");
        } else {
            RunRequest request = RunRequest.of(input, with, reference, halves, common().lanes());
            reconstruct(common(), request, out, scratch, false);
        }
    }

    static void reconstruct(Common common, RunRequest request, Path out, @Nullable Path scratch, boolean resumed)
            throws IOException {
        ResultFolder folder = new ResultFolder(out, common.replace() || resumed);
        folder.requireFree();
        if (!resumed && !common.replace() && WorkFolder.isUnfinished(out)) {
            throw new IOException(out + " holds a reconstruction that was not finished; go on with it: raysheaf"
                    + " reconstruct --resume " + out + ", or begin anew with --replace");
        }
        String reference = request.reference();
        Phantom known = reference == null ? null : Phantoms.read(Path.of(reference));
        ReconstructionInput found = request.find(common);
        ForkJoinPool pool = common.pool();
        try (Interruption interruption = Interruption.of(out)) {
            WorkFolder work = new WorkFolder(out, request, scratch, interruption);
            if (!resumed) {
                work.clear();
            }
            ReconstructionPlan plan = found.plan().with(request.lanes(), request.halves());
            Reconstruction done = Reconstruction.of(found.list(), plan, found.base(), work, common, pool);
            Figures figures = Figures.of(done);
            Calibration calibration = known == null
                    ? null
                    : Calibration.of(
                            done.whole().image(),
                            known,
                            0.5 * done.systems().system().fieldOfView().lengthMm(),
                            done.systems().system().description().name());
            Map<String, Object> results = folder.write(done, figures, calibration, pool.getParallelism());
            work.clear();
            common.print(results, folder.lines(done, figures));
        } catch (NoUsableEventsException e) {
            throw new IOException(nothingUsable(found.list(), e.tally()), e);
        }
    }

    private static String nothingUsable(Path list, EventTally tally) {
        String trouble = tally.used() > 0
                ? "too few events for images of the odd and of the even ones; leave out halves"
                : "no event can be used, so there is no image";
        return list + ": " + trouble + "\n" + String.join("\n", new Accounting(tally).lines());
    }
}
