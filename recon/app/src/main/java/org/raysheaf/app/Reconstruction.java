package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.Estimate;
import org.raysheaf.engine.Estimator;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.NoUsableEventsException;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.Positions;
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
 * @param blur the blur that was undone, or null
 * @param frames the images of parts of the list
 */
record Reconstruction(
        ListFile list,
        Systems systems,
        ReconstructionPlan plan,
        Grid grid,
        CorrectedModel model,
        Estimate whole,
        @Nullable Estimate odd,
        @Nullable Estimate even,
        @Nullable BlurChoice blur,
        List<FrameImage> frames) {
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
        noteUnusedDepths(list, systems, common);
        Grid grid = plan.grid().gridFor(systems.system());
        List<Frame> frames = Frame.of(plan.frames(), list, listPath);
        BlurChoice blur = BlurChoice.of(plan, list, listPath, systems.system(), grid, pool);
        Maker maker = new Maker(list, systems, plan, base, grid, blur, work, common, pool);
        CorrectedModel model = maker.model(list);
        Estimate whole = maker.estimate(list, model, EventSelection.ALL, "all");
        Estimate odd = plan.halves() ? maker.estimate(list, model, EventSelection.ODD, "odd") : null;
        Estimate even = plan.halves() ? maker.estimate(list, model, EventSelection.EVEN, "even") : null;
        List<FrameImage> images = new ArrayList<>();
        for (Frame frame : frames) {
            images.add(maker.image(frame));
        }
        return new Reconstruction(list, systems, plan, grid, model, whole, odd, even, blur, images);
    }

    private static void noteUnusedDepths(ListFile list, Systems systems, Common common) {
        Positions depths = new Positions(1, false, true);
        if (list.attributes().contains(Attribute.DEPTH_A) && !depths.continuous(systems.system())) {
            common.note(
                    "the list has measured depths, which are not used: no block of crystals has a depth_fwhm_mm in its"
                            + " readout");
        }
    }

    /** Singles have no lines. */
    static void requirePairs(Path path, ListFile list) throws IOException {
        if (list.kind() != ListKind.PAIRS) {
            throw new IOException(path + ": expected a list of pairs, found "
                    + list.kind().phrase() + "; make pairs of them with: raysheaf pair " + path + " --out LIST.h5");
        }
    }

    /** From mm³ to counts: 1 Bq/mL in 1 mm³ emits so many pairs while the list was taken. */
    static Image countsPerBqPerMl(Image sensitivity, double pairsPerBqPerMlAndMm3) {
        Image counts = sensitivity.copy();
        for (int j = 0; j < counts.values().length; j++) {
            counts.values()[j] *= (float) pairsPerBqPerMlAndMm3;
        }
        return counts;
    }

    /** Makes one image after another. */
    private record Maker(
            ListFile list,
            Systems systems,
            ReconstructionPlan plan,
            @Nullable Path base,
            Grid grid,
            @Nullable BlurChoice blur,
            WorkFolder work,
            Common common,
            ForkJoinPool pool) {
        CorrectedModel model(EventSource part) throws IOException {
            return CorrectedModel.of(part, systems, plan, base, grid, common, pool);
        }

        Estimate estimate(EventSource part, CorrectedModel model, EventSelection selection, String name)
                throws IOException {
            Progress progress = common.progress();
            Image start =
                    new FirstImage(part, model, selection).of(plan.estimation(), base, work.storage(), pool, progress);
            try (EventStore store = EventLoader.load(
                    part,
                    model.sheaves(),
                    model.support(),
                    selection,
                    plan.estimation().parts(),
                    model.background(),
                    work.storage(),
                    pool,
                    progress)) {
                return new Estimator(
                                store,
                                model.counts(),
                                blur == null ? null : blur.model(),
                                start,
                                plan.estimation(),
                                pool)
                        .run(
                                new PassLines(plan.estimation().passes(), common),
                                progress,
                                work.checkpoints(name, key(model, store, start)));
            }
        }

        /** The image of a part at the start of the list; zeros if nothing was recorded in it. */
        FrameImage image(Frame frame) throws IOException {
            common.note(frame.name() + " " + frame.where());
            try {
                Estimate estimate = estimate(frame.part(), model(frame.part()), EventSelection.ALL, frame.name());
                Image image = estimate.image().copy();
                for (int j = 0; j < image.values().length; j++) {
                    image.values()[j] *= (float) frame.part().toListStart();
                }
                return new FrameImage(frame, image, estimate.events());
            } catch (NoUsableEventsException e) {
                return new FrameImage(frame, new Image(grid), 0);
            }
        }

        /** Digest of all that an image depends on beside its name: what a checkpoint must have in common with the work that goes on. */
        private String key(CorrectedModel model, EventStore store, @Nullable Image start) {
            return Cache.digest(
                    Raysheaf.version(),
                    list.digest().orElse("no checksums, " + list.events() + " events"),
                    DescriptionWriter.render("reconstruction", plan),
                    Cache.digest(model.counts().values()),
                    start == null ? "uniform start" : Cache.digest(start.values()),
                    store.events() + " events, " + store.planes() + " planes, " + store.subsets() + " subsets");
        }
    }
}
