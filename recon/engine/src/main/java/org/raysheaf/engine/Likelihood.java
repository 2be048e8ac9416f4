package org.raysheaf.engine;

import java.util.concurrent.ForkJoinPool;
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
 * <p>Used by one thread, works on the threads of the pool; the result never depends on how many there are.
 */
final class Likelihood {
    private final EventStore store;
    private final float[] sensitivity;
    private final Lanes lanes;
    private final int[][] runs;
    private Progress progress = Progress.SILENT;
    private String stage = "";

    /**
     * Prepares the sums.
     *
     * @param store the events
     * @param sensitivity expected counts of the whole list per Bq/mL in each voxel; above 0 wherever the store's support is
     * @param lanes accumulator images; 0 lets the problem decide
     * @param pool does the work
     * @throws IllegalArgumentException if the sensitivity has another shape, or if voxels of the support have none
     */
    Likelihood(EventStore store, Image sensitivity, int lanes, ForkJoinPool pool) {
        this.store = store;
        this.sensitivity = store.lattice().fromImage(sensitivity);
        requireSeen();
        int count = lanes > 0
                ? lanes
                : Lanes.suited(
                        store.planes() / store.subsets(), lattice().grid().voxels());
        this.lanes = new Lanes(count, lattice(), pool);
        this.runs = new int[store.subsets()][];
        for (int subset = 0; subset < runs.length; subset++) {
            runs[subset] = store.cut(subset, count);
        }
    }

    /** A store that holds only some of the events stands for as much less exposure. */
    private void requireSeen() {
        float share = (float) store.share();
        for (int j = 0; j < sensitivity.length; j++) {
            sensitivity[j] *= share;
            if (support()[j] > 0 && !(sensitivity[j] > 0 && sensitivity[j] < Float.POSITIVE_INFINITY)) {
                throw new IllegalArgumentException("voxels that may hold activity need a finite sensitivity > 0: found "
                        + sensitivity[j] + "; make the support with FieldOfView.support");
            }
        }
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
        return runs.length;
    }

    int laneCount() {
        return lanes.count();
    }

    /** The part φ of all events that is in a subset. */
    double part(int subset) {
        return (store.start(subset + 1) - store.start(subset)) / (double) store.events();
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
        int[] run = runs[subset];
        progress.remark(subsets() == 1 ? stage : stage + ", subset " + (subset + 1) + " of " + subsets());
        double[] logSums = new double[lanes.count()];
        lanes.each(lane -> {
            logSums[lane] = Visit.events(store, run[lane], run[lane + 1], image, lanes.accumulator(lane));
            progress.advance(run[lane + 1] - run[lane]);
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
        return lanes.collect(work);
    }
}
