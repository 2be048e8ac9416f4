package org.raysheaf.engine.prior;

import java.util.Arrays;
import org.raysheaf.engine.ray.Lattice;

/**
 * The penalty β R(x) of images on a lattice, with gradient and diagonal of the Hessian, as the package comment defines it. All work is on
 * runs of voxels, so that callers can share them among threads; nothing is allocated. Immutable, safe for use by several threads.
 */
public final class Penalty {
    /** Neighbours in each of three directions. */
    private static final int NEIGHBOURS = 26;

    /** Voxels that are dealt with for all neighbours in turn, few enough to stay in the cache. */
    private static final int BATCH = 2048;

    private final PairPotential potential;
    private final double beta;
    private final float[] support;
    private final int[] offsets = new int[NEIGHBOURS];
    private final float[] weights = new float[NEIGHBOURS];
    /** No voxel inside the border has a neighbour further away in memory. */
    private final int reach;

    /**
     * A prior for the images of a lattice.
     *
     * @param prior kind and strength
     * @param lattice what images lie on
     * @param support 1 where there may be activity, else 0; shared
     * @param typical activity concentration x̄ of the image (Bq/mL), above 0
     * @param meanSensitivity s̄, mean over the support (counts per Bq/mL), above 0
     */
    public Penalty(Prior prior, Lattice lattice, float[] support, double typical, double meanSensitivity) {
        potential = prior.potential(typical);
        beta = prior.strength() * meanSensitivity;
        this.support = support;
        double[] pitch = {
            lattice.grid().spacingXMm(),
            lattice.grid().spacingYMm(),
            lattice.grid().spacingZMm()
        };
        double smallest = Math.min(pitch[0], Math.min(pitch[1], pitch[2]));
        int i = 0;
        for (int x = -1; x <= 1; x++) {
            for (int y = -1; y <= 1; y++) {
                for (int z = -1; z <= 1; z++) {
                    if (x != 0 || y != 0 || z != 0) {
                        offsets[i] = x * lattice.stride(0) + y * lattice.stride(1) + z * lattice.stride(2);
                        weights[i++] =
                                (float) (smallest / Math.hypot(x * pitch[0], Math.hypot(y * pitch[1], z * pitch[2])));
                    }
                }
            }
        }
        reach = lattice.stride(0) + lattice.stride(1) + lattice.stride(2);
    }

    /**
     * The part of β R(x) that a run of voxels has: of every pair with a neighbour, half.
     *
     * @param x the image
     * @param first first voxel
     * @param last after the last voxel
     * @return the part (counts)
     */
    public double value(float[] x, int first, int last) {
        double sum = 0;
        for (int j = Math.max(first, reach); j < Math.min(last, x.length - reach); j++) {
            if (support[j] > 0) {
                for (int i = 0; i < NEIGHBOURS; i++) {
                    int k = j + offsets[i];
                    if (support[k] > 0) {
                        sum += weights[i] * potential.value(x[j], x[k]);
                    }
                }
            }
        }
        return 0.5 * beta * sum;
    }

    /**
     * β ∂R/∂x_j of a run of voxels.
     *
     * @param x the image
     * @param first first voxel
     * @param last after the last voxel
     * @param out receives the gradient of these voxels (counts per Bq/mL), 0 outside the support
     */
    public void gradient(float[] x, int first, int last, float[] out) {
        each(first, last, out, (from, to, i) -> potential.addSlopes(x, support, from, to, offsets[i], weights[i], out));
    }

    /**
     * β ∂²R/∂x_j² of a run of voxels.
     *
     * @param x the image
     * @param first first voxel
     * @param last after the last voxel
     * @param out receives the curvature of these voxels (counts per (Bq/mL)²), 0 outside the support
     */
    public void curvature(float[] x, int first, int last, float[] out) {
        each(
                first,
                last,
                out,
                (from, to, i) -> potential.addCurvatures(x, support, from, to, offsets[i], weights[i], out));
    }

    private interface Neighbour {
        void add(int from, int to, int i);
    }

    /** The border has no support and no neighbours on one side; it is left out or multiplied away. */
    private void each(int first, int last, float[] out, Neighbour work) {
        Arrays.fill(out, first, last, 0);
        int end = Math.min(last, out.length - reach);
        for (int from = Math.max(first, reach); from < end; from += BATCH) {
            int to = Math.min(end, from + BATCH);
            for (int i = 0; i < NEIGHBOURS; i++) {
                work.add(from, to, i);
            }
            for (int j = from; j < to; j++) {
                out[j] *= (float) beta * support[j];
            }
        }
    }
}
