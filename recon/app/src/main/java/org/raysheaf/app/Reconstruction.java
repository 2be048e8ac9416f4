package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.Estimate;
import org.raysheaf.engine.FieldOfView;
import org.raysheaf.engine.ListModeEm;
import org.raysheaf.engine.PassListener;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.io.list.ListFile;

/**
 * The way from a list to an image: its system, the sheaves of its events, the sensitivity, the estimate.
 *
 * @param list the list
 * @param systems the system that the list carries, or that the plan names if the list carries none
 * @param plan how to reconstruct
 * @param grid the voxels
 * @param sensitivity expected counts of the whole list per Bq/mL
 * @param whole the image of all events (Bq/mL)
 * @param odd the image of the odd events, if halves were asked for
 * @param even the image of the even events, if halves were asked for
 */
record Reconstruction(
        ListFile list,
        Systems systems,
        ReconstructionPlan plan,
        Grid grid,
        Image sensitivity,
        Estimate whole,
        @Nullable Estimate odd,
        @Nullable Estimate even) {
    static Reconstruction of(
            Path listPath, ReconstructionPlan plan, @Nullable Path base, Common common, ForkJoinPool pool)
            throws IOException {
        Progress progress = common.progress();
        ListFile opened = ListFile.open(listPath);
        opened.warnings().forEach(common::note);
        ListHeader header = opened.header();
        Systems systems = SystemOfList.of(header, listPath, plan.systemBeside(base), common, pool, progress);
        ListFile list = opened.withElements(systems.system().elements());
        Grid grid = plan.grid().gridFor(systems.system());
        CoincidenceSheaves sheaves = systems.sheaves();
        Image counts = countsPerBqPerMl(systems.sensitivity(sheaves, grid), header.pairsPerBecquerel());
        Image support = FieldOfView.support(
                counts, FieldOfView.cylinder(systems.system().fieldOfView().radiusMm()));
        Estimation estimation = new Estimation(list, sheaves, counts, support, plan, pool, progress);
        return new Reconstruction(
                list,
                systems,
                plan,
                grid,
                counts,
                estimation.of(EventSelection.ALL),
                plan.halves() ? estimation.of(EventSelection.ODD) : null,
                plan.halves() ? estimation.of(EventSelection.EVEN) : null);
    }

    /** From mm³ to counts: 1 Bq/mL is 10⁻³ Bq/mm³, and each becquerel emits so many pairs while the list was taken. */
    static Image countsPerBqPerMl(Image sensitivity, double pairsPerBecquerel) {
        Image counts = sensitivity.copy();
        for (int j = 0; j < counts.values().length; j++) {
            counts.values()[j] *= (float) (1e-3 * pairsPerBecquerel);
        }
        return counts;
    }

    private record Estimation(
            ListFile list,
            CoincidenceSheaves sheaves,
            Image sensitivity,
            Image support,
            ReconstructionPlan plan,
            ForkJoinPool pool,
            Progress progress) {
        Estimate of(EventSelection selection) throws IOException {
            EventStore store = EventLoader.load(
                    list,
                    sheaves,
                    support,
                    selection,
                    plan.estimation().subsets(),
                    EventBackground.NONE,
                    pool,
                    progress);
            return new ListModeEm(store, sensitivity, plan.estimation(), pool).run(PassListener.SILENT, progress);
        }
    }
}
