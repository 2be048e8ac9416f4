package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.Locale;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.Estimate;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.cache.Cache;
import org.raysheaf.io.description.DescriptionWriter;
import org.raysheaf.io.list.ListFile;

/**
 * The way from a list to an image: its system, the sheaves of its events, the sensitivity, the estimate.
 *
 * @param list the list
 * @param systems the system that the list carries, or that the plan names if the list carries none
 * @param plan how to reconstruct
 * @param grid the voxels
 * @param model sheaves with all factors, sensitivity, background
 * @param whole the image of all events (Bq/mL)
 * @param odd the image of the odd events, if halves were asked for
 * @param even the image of the even events, if halves were asked for
 */
record Reconstruction(
        ListFile list,
        Systems systems,
        ReconstructionPlan plan,
        Grid grid,
        CorrectedModel model,
        Estimate whole,
        @Nullable Estimate odd,
        @Nullable Estimate even) {
    static Reconstruction of(
            Path listPath,
            ReconstructionPlan plan,
            @Nullable Path base,
            WorkFolder work,
            Common common,
            ForkJoinPool pool)
            throws IOException {
        Progress progress = common.progress();
        ListFile opened = ListFile.open(listPath);
        requirePairs(listPath, opened);
        opened.warnings().forEach(common::note);
        ListHeader header = opened.header();
        Systems systems = SystemOfList.of(header, listPath, plan.systemBeside(base), common, pool, progress);
        ListFile list = opened.withElements(systems.system().elements());
        Grid grid = plan.grid().gridFor(systems.system());
        CorrectedModel model = CorrectedModel.of(list, systems, plan.corrections(), base, grid, common, pool);
        Estimation estimation = new Estimation(list, model, plan, work, common, pool);
        return new Reconstruction(
                list,
                systems,
                plan,
                grid,
                model,
                estimation.of(EventSelection.ALL),
                plan.halves() ? estimation.of(EventSelection.ODD) : null,
                plan.halves() ? estimation.of(EventSelection.EVEN) : null);
    }

    /** Singles have no lines. */
    static void requirePairs(Path path, ListFile list) throws IOException {
        if (list.kind() != ListKind.PAIRS) {
            throw new IOException(path + ": expected a list of pairs, found "
                    + list.kind().phrase() + "; make pairs of them with: raysheaf pair " + path + " --out LIST.h5");
        }
    }

    /** From mm³ to counts: 1 Bq/mL is 10⁻³ Bq/mm³, and each becquerel emits so many pairs while the list was taken. */
    static Image countsPerBqPerMl(Image sensitivity, double pairsPerBecquerel) {
        Image counts = sensitivity.copy();
        for (int j = 0; j < counts.values().length; j++) {
            counts.values()[j] *= (float) (1e-3 * pairsPerBecquerel);
        }
        return counts;
    }

    /** Digest of all that an image depends on beside its name: what a checkpoint must have in common with the work that goes on. */
    private static String key(ListFile list, CorrectedModel model, ReconstructionPlan plan, EventStore store) {
        return Cache.digest(
                Raysheaf.version(),
                list.digest().orElse("no checksums, " + list.events() + " events"),
                DescriptionWriter.render("reconstruction", plan),
                Cache.digest(model.counts().values()),
                store.events() + " events, " + store.planes() + " planes, " + store.subsets() + " subsets");
    }

    private record Estimation(
            ListFile list,
            CorrectedModel model,
            ReconstructionPlan plan,
            WorkFolder work,
            Common common,
            ForkJoinPool pool) {
        Estimate of(EventSelection selection) throws IOException {
            Progress progress = common.progress();
            try (EventStore store = EventLoader.load(
                    list,
                    model.sheaves(),
                    model.support(),
                    selection,
                    plan.estimation().subsets(),
                    model.background(),
                    work.storage(),
                    pool,
                    progress)) {
                String name = selection.name().toLowerCase(Locale.ROOT);
                return new Estimator(store, model.counts(), plan.estimation(), pool)
                        .run(
                                new PassLines(plan.estimation().passes(), common),
                                progress,
                                work.checkpoints(name, key(list, model, plan, store)));
            }
        }
    }
}
