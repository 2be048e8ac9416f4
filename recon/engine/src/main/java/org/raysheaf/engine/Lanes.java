package org.raysheaf.engine;

import java.util.Arrays;
import java.util.concurrent.ForkJoinPool;
import java.util.function.IntConsumer;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.engine.ray.Tasks;

/**
 * Accumulator images, one per lane. Work is dealt to lanes by the caller, in an order that does not depend on the threads; what the
 * lanes gathered is added up in the order of the lanes. So the number of threads never changes a bit of the result.
 */
final class Lanes {
    /** The most lanes that are taken without being asked for. */
    private static final int MOST = 16;

    /** The most values that the accumulators of all lanes hold without being asked to: 1 GiB. */
    private static final long MOST_VALUES = 1L << 28;

    /** Voxels handled at a time when lanes are added up; sums over voxels are formed per piece, then over pieces. */
    private static final int PIECE = 1 << 15;

    private final ForkJoinPool pool;
    private final float[][] accumulators;

    Lanes(int lanes, Lattice lattice, ForkJoinPool pool) {
        this.pool = pool;
        accumulators = new float[lanes][lattice.size()];
    }

    /** Does something with the voxels from first to last − 1, given their sums over all lanes, and returns a number to be added up. */
    @FunctionalInterface
    interface VoxelWork {
        double apply(int first, int last, float[] sums);
    }

    /** Does something with the voxels from first to last − 1 and returns a number to be added up. */
    @FunctionalInterface
    interface VoxelRun {
        double apply(int first, int last);
    }

    /**
     * How many lanes suit a problem. Adding up one more lane costs about as much per voxel as a quarter of a plane costs a ray, so lanes
     * are limited to a few per cent of the work, and to a memory of 1 GiB.
     *
     * @param planes voxel planes that rays visit per update
     * @param voxels voxels of the image
     * @return 1, 2, 4, 8 or 16
     */
    static int suited(long planes, int voxels) {
        long most = Math.min(planes / (4L * voxels), MOST_VALUES / voxels);
        return (int) Math.max(1, Long.highestOneBit(Math.min(most, MOST)));
    }

    int count() {
        return accumulators.length;
    }

    /**
     * Lets every lane do its part.
     *
     * @param work is given the number of the lane
     */
    void each(IntConsumer work) {
        Tasks.forEach(pool, count(), work);
    }

    /**
     * The accumulator of a lane.
     *
     * @param lane number of the lane
     * @return values on the lattice
     */
    float[] accumulator(int lane) {
        return accumulators[lane];
    }

    /**
     * Adds up the lanes voxel by voxel, in parallel over voxels, and empties them.
     *
     * @param work is given runs of voxels and the array that holds their sums; may be called by several threads
     * @return the sum of what the work returned, in the order of the voxels
     */
    double collect(VoxelWork work) {
        float[] sums = accumulators[0];
        return voxels((first, last) -> {
            for (int lane = 1; lane < accumulators.length; lane++) {
                float[] other = accumulators[lane];
                for (int i = first; i < last; i++) {
                    sums[i] += other[i];
                }
                Arrays.fill(other, first, last, 0);
            }
            double part = work.apply(first, last, sums);
            Arrays.fill(sums, first, last, 0);
            return part;
        });
    }

    /**
     * Goes through all voxels, in parallel over runs of them.
     *
     * @param work is given runs of voxels; may be called by several threads
     * @return the sum of what the work returned, in the order of the voxels
     */
    double voxels(VoxelRun work) {
        int size = accumulators[0].length;
        int pieces = (size + PIECE - 1) / PIECE;
        double[] partial = new double[pieces];
        Tasks.forEach(pool, pieces, piece -> {
            int first = piece * PIECE;
            partial[piece] = work.apply(first, Math.min(size, first + PIECE));
        });
        double total = 0;
        for (double part : partial) {
            total += part;
        }
        return total;
    }
}
