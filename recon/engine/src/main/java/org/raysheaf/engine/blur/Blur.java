package org.raysheaf.engine.blur;

import java.util.Arrays;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.engine.ray.Tasks;
import org.raysheaf.geometry.frame.Grid;

/**
 * The blur of an image as an operator B that neither makes nor loses counts, and its exact transpose:
 *
 * <pre>
 * B = M G + diag(1 − Gᵀm),    G = Σ_k w_k Z_k Y_k X_k
 * </pre>
 *
 * <p>G is a sum of Gaussians that act axis by axis; m is the support, M = diag(m). What G would carry out of the support stays in the voxel it
 * came from, so every column of B sums to 1 for voxels of the support, and nothing ever lies where no event looks.
 *
 * <p>The kernel of one axis is the Gaussian of the lattice, T(d) = e⁻ᵗ I_d(t) (Lindeberg 1990, IEEE Trans. PAMI 12:234). Its variance is exactly t for
 * any t, also far below a voxel, where a sampled Gaussian would be too narrow and an integrated one too wide. The width belongs to the place that
 * activity comes from; it changes along the first two axes only, which lets all inner loops run over neighbours in memory.
 *
 * <p>Used by one thread, works on the threads of the pool; each value is summed in one order, whatever their number. Holds three images.
 */
public final class Blur {
    /** Part of a kernel that may be cut off; it stays where it came from. A Gaussian ends at 4.4 σ then. */
    private static final double TAIL = 1e-5;
    /** Widths that change from place to place are rounded to so many steps of variance, 1/128 of their span at most. */
    private static final int STEPS = 64;
    /** No kernel reaches farther (voxels). */
    private static final int FARTHEST = 4096;

    private final ForkJoinPool pool;
    private final int nx;
    private final int ny;
    private final int nz;
    private final int strideX;
    private final int strideY;
    /** Kernels by part, axis and step of width: the half from 0 to its reach. Those of the first axis carry the part's weight. */
    private final float[][][][] kernels;
    /** Step of width by x · ny + y. */
    private final byte[] step;

    private final float[] support;
    private final float[] staying;
    private final float[] inside;
    private final float[] half;

    /**
     * Prepares the operator.
     *
     * @param model what blurs
     * @param lattice where the image lies
     * @param support 1 where there may be activity, else 0, on the lattice; not copied
     * @param pool does the work
     */
    public Blur(BlurModel model, Lattice lattice, float[] support, ForkJoinPool pool) {
        this.pool = pool;
        this.support = support;
        Grid grid = lattice.grid();
        nx = grid.nx();
        ny = grid.ny();
        nz = grid.nz();
        strideX = lattice.stride(0);
        strideY = lattice.stride(1);
        int parts = model.kernel().parts().size();
        step = new byte[nx * ny];
        double[] added = steps(model.chords());
        double[] spacing = {grid.spacingXMm(), grid.spacingYMm(), grid.spacingZMm()};
        kernels = new float[parts][3][added.length][];
        for (int k = 0; k < parts; k++) {
            Mixture.Part part = model.kernel().parts().get(k);
            float weight = (float) part.weight();
            for (int axis = 0; axis < 3; axis++) {
                for (int s = 0; s < added.length; s++) {
                    double variance = part.sigmaMm() * part.sigmaMm() + added[s];
                    float[] taps = kernel(variance / (spacing[axis] * spacing[axis]));
                    for (int d = 0; d < taps.length && axis == 0; d++) {
                        taps[d] *= weight;
                    }
                    kernels[k][axis][s] = taps;
                }
            }
        }
        inside = new float[lattice.size()];
        half = new float[lattice.size()];
        staying = new float[lattice.size()];
        float[] reached = new float[lattice.size()];
        gather(support, reached);
        for (int j = 0; j < staying.length; j++) {
            staying[j] = support[j] > 0 ? 1 - reached[j] : 0;
        }
    }

    /** Deals the places to steps of width; returns the variance of each step (mm²). */
    private double[] steps(@Nullable ChordWidths chords) {
        if (chords == null) {
            return new double[1];
        }
        double[] variances = new double[step.length];
        for (int x = 0; x < nx; x++) {
            for (int y = 0; y < ny; y++) {
                variances[x * ny + y] = chords.varianceMm2(x, y);
            }
        }
        double least = Arrays.stream(variances).min().orElseThrow();
        double span = Arrays.stream(variances).max().orElseThrow() - least;
        for (int i = 0; i < step.length; i++) {
            step[i] = (byte) (span > 0 ? Math.rint((variances[i] - least) / span * (STEPS - 1)) : 0);
        }
        double[] added = new double[STEPS];
        for (int s = 0; s < STEPS; s++) {
            added[s] = least + span * s / (STEPS - 1);
        }
        return added;
    }

    /** T(d) = (1/π) ∫₀^π e^(t (cos θ − 1)) cos dθ dθ; the sum over equal steps of a whole turn is exact to rounding. */
    static float[] kernel(double t) {
        int points = 64 + 4 * (int) Math.ceil(8 * Math.sqrt(t) + 8);
        double[] values = new double[Math.min(FARTHEST, points / 2)];
        double sum = 0;
        for (int d = 0; d < values.length; d++) {
            double value = 0;
            for (int i = 0; i < points; i++) {
                double angle = 2 * Math.PI * i / points;
                value += Math.exp(t * (Math.cos(angle) - 1)) * Math.cos(d * angle);
            }
            values[d] = Math.max(0, value / points);
            sum += d == 0 ? values[0] : 2 * values[d];
            if (sum >= 1 - TAIL) {
                float[] kernel = new float[d + 1];
                for (int i = 0; i <= d; i++) {
                    kernel[i] = (float) values[i];
                }
                return kernel;
            }
        }
        throw new IllegalArgumentException("a blur of " + Math.sqrt(t) + " voxels is wider than can be");
    }

    /**
     * Blurs an image.
     *
     * @param image values on the lattice, 0 outside the support
     * @param blurred receives B x; 0 outside the support; another array
     */
    public void apply(float[] image, float[] blurred) {
        Tasks.forEach(pool, nx, x -> clear(blurred, x));
        for (float[][][] kernel : kernels) {
            Tasks.forEach(pool, ny, y -> acrossX(image, inside, y, kernel[0], false));
            Tasks.forEach(pool, nx, x -> {
                acrossY(inside, half, x, kernel[1], false);
                alongZ(half, blurred, x, kernel[2]);
            });
        }
        Tasks.forEach(pool, nx, x -> keep(image, blurred, x));
    }

    /**
     * Applies the transpose: for each voxel, what its blurred activity meets.
     *
     * @param values on the lattice; set to 0 outside the support
     * @param met receives Bᵀ u in the support, 0 elsewhere; another array
     */
    public void transpose(float[] values, float[] met) {
        Tasks.forEach(pool, nx, x -> mask(values, x));
        gather(values, met);
        Tasks.forEach(pool, nx, x -> keep(values, met, x));
    }

    /** Gᵀ u. */
    private void gather(float[] values, float[] met) {
        Tasks.forEach(pool, nx, x -> clear(met, x));
        for (float[][][] kernel : kernels) {
            Tasks.forEach(pool, nx, x -> {
                clear(half, x);
                alongZ(values, half, x, kernel[2]);
                acrossY(half, inside, x, kernel[1], true);
            });
            Tasks.forEach(pool, ny, y -> acrossX(inside, met, y, kernel[0], true));
        }
    }

    private int row(int x, int y) {
        return (x + 1) * strideX + (y + 1) * strideY + 1;
    }

    private void clear(float[] values, int x) {
        Arrays.fill(values, row(x, 0), row(x, ny - 1) + nz, 0);
    }

    private void mask(float[] values, int x) {
        for (int i = row(x, 0); i < row(x, ny - 1) + nz; i++) {
            values[i] *= support[i];
        }
    }

    private void keep(float[] from, float[] to, int x) {
        for (int i = row(x, 0); i < row(x, ny - 1) + nz; i++) {
            to[i] = to[i] * support[i] + staying[i] * from[i];
        }
    }

    /** Transposed it comes last and adds to what other parts of the kernel left. */
    private void acrossX(float[] from, float[] to, int y, float[][] kernel, boolean transposed) {
        for (int x = 0; x < nx && !transposed; x++) {
            Arrays.fill(to, row(x, y), row(x, y) + nz, 0);
        }
        across(from, to, row(0, y), strideX, nx, kernel, y, ny, transposed);
    }

    private void acrossY(float[] from, float[] to, int x, float[][] kernel, boolean transposed) {
        clear(to, x);
        across(from, to, row(x, 0), strideY, ny, kernel, x * ny, 1, transposed);
    }

    /** Adds, row by row, what n rows get from each other; forwards the width is that of the row that gives, transposed of the one that gets. */
    private void across(
            float[] from,
            float[] to,
            int first,
            int stride,
            int n,
            float[][] kernel,
            int firstPlace,
            int placeStride,
            boolean transposed) {
        int farthest = kernel[kernel.length - 1].length;
        for (int i = 0; i < n; i++) {
            int at = first + i * stride;
            float[] own = kernel[step[firstPlace + i * placeStride]];
            addPair(from, at, own[0], at, 0, to, at);
            for (int d = 1; d < farthest; d++) {
                int low = i - d;
                int high = i + d;
                float lowTap = low < 0 ? 0 : tap(transposed ? own : kernel[step[firstPlace + low * placeStride]], d);
                float highTap =
                        high >= n ? 0 : tap(transposed ? own : kernel[step[firstPlace + high * placeStride]], d);
                if (lowTap != 0 || highTap != 0) {
                    addPair(
                            from,
                            low < 0 ? at : at - d * stride,
                            lowTap,
                            high >= n ? at : at + d * stride,
                            highTap,
                            to,
                            at);
                }
            }
        }
    }

    private static float tap(float[] kernel, int d) {
        return d < kernel.length ? kernel[d] : 0;
    }

    private void addPair(float[] from, int low, float lowTap, int high, float highTap, float[] to, int at) {
        for (int z = 0; z < nz; z++) {
            to[at + z] += lowTap * from[low + z] + highTap * from[high + z];
        }
    }

    /** Adds what the voxels of each row get from each other; one width to a row, so this is its own transpose. */
    private void alongZ(float[] from, float[] to, int x, float[][] kernel) {
        for (int y = 0; y < ny; y++) {
            float[] own = kernel[step[x * ny + y]];
            int first = row(x, y);
            addPair(from, first, own[0], first, 0, to, first);
            for (int d = 1; d < own.length && d < nz; d++) {
                float tap = own[d];
                for (int i = first + d; i < first + nz; i++) {
                    to[i] += tap * from[i - d];
                }
                for (int i = first; i < first + nz - d; i++) {
                    to[i] += tap * from[i + d];
                }
            }
        }
    }
}
