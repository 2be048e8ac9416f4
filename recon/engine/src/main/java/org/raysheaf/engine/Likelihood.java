package org.raysheaf.engine;

import java.util.Arrays;
import java.util.concurrent.ForkJoinPool;
import java.util.function.IntPredicate;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.blur.Blur;
import org.raysheaf.engine.blur.BlurModel;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;

/**
 * The Poisson likelihood of a list, as every update rule asks for it: how well an image x explains the events, and into which voxels the
 * events would put more,
 *
 * <pre>
 * L(x) = Σ_e ln q_e − Σ_j s_j x_j,    ∂L/∂x_j = Σ_e a_ej / q_e − s_j,    q_e = Σ_j a_ej x_j + b_e/c_e
 * </pre>
 *
 * <p>with the activity concentration x (Bq/mL), the weighted length a_ej of event e in voxel j (mm), the sensitivity s_j (counts per
 * Bq/mL) and the background b_e/c_e. Sums over events can be had subset by subset; a subset with the part φ of all events stands for φ of
 * the sensitivity. Values are on the lattice, with its border.
 *
 * <p>Events may be kept out of all subsets, to be asked later how well an image explains them; sums, φ and sensitivity are then those of the
 * others.
 *
 * <p>With a blur B the lengths and the sensitivity are those of the blurred image: Bᵀ stands before both sums over events and before s, so
 * whoever asks sees nothing but other numbers.
 *
 * <p>Used by one thread, works on the threads of the pool; the result never depends on how many there are.
 */
final class Likelihood {
    private final EventStore store;
    private final float[] sensitivity;
    private final Lanes lanes;
    /** Of each part into which the store has dealt the events, where the runs of the lanes begin. */
    private final int[][] runs;
    /** The parts that make a subset. */
    private final int[][] members;

    private final int[] heldOutParts;
    private final long events;
    private final @Nullable Blur blur;
    /** The blurred image on the way to the events, then what the events say about it. */
    private final float[] blurred;

    private final float[] unblurred;
    private Progress progress = Progress.SILENT;
    private String stage = "";

    /**
     * Prepares the sums.
     *
     * @param store the events
     * @param sensitivity expected counts of the whole list per Bq/mL in each voxel, as without blur; above 0 wherever the store's support is
     * @param model what blurs the image, or null for nothing
     * @param subsets in how many subsets to take the parts of the store
     * @param heldOutEvery k: part k − 1, 2k − 1 … of the store, and so every k-th event, is kept out; 0 for none
     * @param lanes accumulator images; 0 lets the problem decide
     * @param pool does the work
     * @throws IllegalArgumentException if the sensitivity has another shape, or if voxels of the support have none
     */
    Likelihood(
            EventStore store,
            Image sensitivity,
            @Nullable BlurModel model,
            int subsets,
            int heldOutEvery,
            int lanes,
            ForkJoinPool pool) {
        this.store = store;
        float[] geometric = store.lattice().fromImage(sensitivity);
        blur = model == null ? null : new Blur(model, lattice(), support(), pool);
        blurred = new float[blur == null ? 0 : geometric.length];
        unblurred = new float[blurred.length];
        this.sensitivity = blur == null ? geometric : new float[geometric.length];
        if (blur != null) {
            blur.transpose(geometric, this.sensitivity);
        }
        heldOutParts = parts(part -> heldOut(part, heldOutEvery));
        int[] used = parts(part -> !heldOut(part, heldOutEvery));
        members = new int[subsets][];
        for (int subset = 0; subset < subsets; subset++) {
            int nth = subset;
            members[subset] = IntStream.range(0, used.length)
                    .filter(i -> i % subsets == nth)
                    .map(i -> used[i])
                    .toArray();
        }
        events = count(used);
        requireSeen();
        int count = lanes > 0
                ? lanes
                : Lanes.suited(store.planes() / subsets, lattice().grid().voxels());
        this.lanes = new Lanes(count, lattice(), pool);
        this.runs = new int[store.subsets()][];
        for (int subset = 0; subset < runs.length; subset++) {
            runs[subset] = store.cut(subset, count);
        }
    }

    /** A store that holds only some of the events stands for as much less exposure. */
    private void requireSeen() {
        float share = (float) (store.share() * events / store.events());
        for (int j = 0; j < sensitivity.length; j++) {
            sensitivity[j] *= share;
            if (support()[j] > 0 && !(sensitivity[j] > 0 && sensitivity[j] < Float.POSITIVE_INFINITY)) {
                throw new IllegalArgumentException("voxels that may hold activity need a finite sensitivity > 0: found "
                        + sensitivity[j] + "; make the support with FieldOfView.support");
            }
        }
    }

    private static boolean heldOut(int part, int every) {
        return every > 0 && part % every == every - 1;
    }

    private int[] parts(IntPredicate wanted) {
        return IntStream.range(0, store.subsets()).filter(wanted).toArray();
    }

    private long count(int[] parts) {
        return Arrays.stream(parts)
                .mapToLong(part -> store.start(part + 1) - store.start(part))
                .sum();
    }

    /** Whom to tell of the events visited, and in which stage of the work they are. */
    void report(Progress to, String inStage) {
        progress = to;
        stage = inStage;
    }

    Lattice lattice() {
        return store.lattice();
    }

    int subsets() {
        return members.length;
    }

    /** Events in all subsets; those kept out do not count. */
    long events() {
        return events;
    }

    int laneCount() {
        return lanes.count();
    }

    /** The part φ of all events that is in a subset. */
    double part(int subset) {
        return count(members[subset]) / (double) events;
    }

    /** s, on the lattice (counts per Bq/mL); shared, not to be written. */
    float[] sensitivity() {
        return sensitivity;
    }

    /** 1 where there may be activity, else 0, on the lattice; shared, not to be written. */
    float[] support() {
        return store.support();
    }

    /** Σ_j s_j x_j, the events that an image makes expect; summed in the order of the voxels. */
    double expectedEvents(float[] image) {
        double sum = 0;
        for (int j = 0; j < image.length; j++) {
            sum += (double) sensitivity[j] * image[j];
        }
        return sum;
    }

    /**
     * Goes through the events of a subset and leaves Σ_e a_ej / q_e with the lanes, to be fetched by {@link #collect}.
     *
     * @param subset number of the subset
     * @param image x on the lattice
     * @return Σ_e ln q_e over the subset
     */
    double visit(int subset, float[] image) {
        progress.remark(subsets() == 1 ? stage : stage + ", subset " + (subset + 1) + " of " + subsets());
        return sum(members[subset], seen(image), true);
    }

    /** What the events see of an image. */
    private float[] seen(float[] image) {
        if (blur == null) {
            return image;
        }
        blur.apply(image, blurred);
        return blurred;
    }

    /**
     * How well an image explains the events, without a thought for how to make it better.
     *
     * @param image x on the lattice
     * @return L(x) of all events in subsets
     */
    double value(float[] image) {
        double sum = -expectedEvents(image);
        float[] seen = seen(image);
        for (int[] parts : members) {
            sum += sum(parts, seen, false);
        }
        return sum;
    }

    /**
     * How well an image explains the events that were kept out.
     *
     * @param image x on the lattice
     * @return L(x) of those events, with as much of the sensitivity as they stand for; NaN if there are none
     */
    double heldOut(float[] image) {
        if (heldOutParts.length == 0) {
            return Double.NaN;
        }
        progress.remark(stage + ", events held out");
        double share = count(heldOutParts) / (double) events;
        return sum(heldOutParts, seen(image), false) - share * expectedEvents(image);
    }

    /** Σ_e ln q_e over parts of the store. */
    private double sum(int[] parts, float[] seen, boolean back) {
        double[] logSums = new double[lanes.count()];
        lanes.each(lane -> {
            for (int part : parts) {
                int first = runs[part][lane];
                int end = runs[part][lane + 1];
                logSums[lane] += Visit.events(store, first, end, seen, back ? lanes.accumulator(lane) : null);
                progress.advance(end - first);
            }
        });
        double sum = 0;
        for (double logSum : logSums) {
            sum += logSum;
        }
        return sum;
    }

    /**
     * Hands out what the visit before gathered, in parallel over runs of voxels, and empties the lanes.
     *
     * @param work is given runs of voxels and the array that holds their Σ_e a_ej / q_e
     * @return the sum of what the work returned, in the order of the voxels
     */
    double collect(Lanes.VoxelWork work) {
        Blur operator = blur;
        if (operator == null) {
            return lanes.collect(work);
        }
        lanes.collect((first, last, sums) -> {
            System.arraycopy(sums, first, blurred, first, last - first);
            return 0;
        });
        operator.transpose(blurred, unblurred);
        return lanes.voxels((first, last) -> work.apply(first, last, unblurred));
    }

    /**
     * Goes through all voxels of the lattice, in parallel over runs of them.
     *
     * @param work is given runs of voxels
     * @return the sum of what the work returned, in the order of the voxels
     */
    double voxels(Lanes.VoxelRun work) {
        return lanes.voxels(work);
    }
}
