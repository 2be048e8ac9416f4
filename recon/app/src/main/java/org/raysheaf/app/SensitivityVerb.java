package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.Positions;
import org.raysheaf.io.description.DescriptionReader;
import org.raysheaf.io.list.ListFile;
import org.raysheaf.io.volume.VolumeFile;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** How well a system sees each voxel. */
@Command(
        name = "sensitivity",
        description = {
            "The sensitivity image. With a list: expected counts of the list per Bq/mL in each voxel.",
            "With a system only: the same for one pair of photons per second and becquerel, for one second."
        })
final class SensitivityVerb extends Verb {
    /** Without a list, one pair for each becquerel. */
    private static final double BQ_PER_BQ_PER_ML_AND_MM3 = 1e-3;

    @Parameters(paramLabel = "RECONSTRUCTION.yaml", description = "Names a list or a system, and the grid.")
    private Path input;

    @Option(
            names = "--out",
            required = true,
            paramLabel = "VOLUME",
            description = "A .nii, .nii.gz or .h5 file (unit mL/Bq).")
    private Path out;

    SensitivityVerb() {}

    @Override
    void run() throws IOException {
        common().requireFree(out);
        ReconstructionPlan plan = DescriptionReader.read(input, "reconstruction", ReconstructionPlan.class);
        ForkJoinPool pool = common().pool();
        Progress progress = common().progress();
        String listName = plan.list();
        String systemName = plan.system();
        Systems systems;
        double pairs = BQ_PER_BQ_PER_ML_AND_MM3;
        Positions positions = new Positions(plan.raysPerEvent(), true, true);
        if (listName != null) {
            Path listPath = input.resolveSibling(listName);
            ListFile list = ListFile.open(listPath);
            systems = SystemOfList.of(list.header(), listPath, plan.systemBeside(input), common(), pool, progress);
            pairs = list.header().pairsPerBqPerMlAndMm3();
            positions = Positions.of(plan.raysPerEvent(), list.attributes());
        } else if (systemName != null) {
            systems = Systems.read(input.resolveSibling(systemName), common(), pool, progress);
        } else {
            throw new IOException(input + ": names neither a list nor a system; add one of them");
        }
        SystemSensitivity sensitivity = systems.sensitivity(
                systems.sheaves().locating(positions),
                plan.grid().gridFor(systems.system()),
                "",
                plan.sensitivity(),
                List.of());
        Image image = Reconstruction.countsPerBqPerMl(sensitivity.image(), pairs);
        VolumeFile.write(image, "mL/Bq", out, common().replace());
        common().print(
                        Map.of("volume", out.toString(), "sum", image.sum(), "sensitivity", sensitivity.how()),
                        List.of("from       " + sensitivity.how(), "written " + out, Common.CAUTION));
    }
}
