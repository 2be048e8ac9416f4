package org.raysheaf.engine;

import java.util.Arrays;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;

/**
 * Smooths an image with a Gaussian, axis after axis. Activity is preserved: what would leave the grid stays within it, spread over the
 * voxels that are there, so the sum over the image does not change (but a uniform image does, near the edges of the grid). Thread-safe.
 */
public final class GaussianFilter {
    /** FWHM / σ of a Gaussian: 2 √(2 ln 2). */
    private static final double FWHM_PER_SIGMA = 2 * Math.sqrt(2 * Math.log(2));

    /** Where the Gaussian is cut off (σ); 6 · 10⁻⁵ of it lies beyond, and normalization puts that back. */
    private static final double REACH = 4;

    private GaussianFilter() {}

    /**
     * Smooths an image.
     *
     * @param image the image; not changed
     * @param fwhmMm full width at half maximum (mm), at least 0
     * @return a new image with the same sum
     * @throws IllegalArgumentException if the width is negative or no number
     */
    public static Image apply(Image image, double fwhmMm) {
        if (!(fwhmMm >= 0) || !Double.isFinite(fwhmMm)) {
            throw new IllegalArgumentException("expected a filter width >= 0 mm: fwhmMm=" + fwhmMm);
        }
        Grid grid = image.grid();
        Image result = image.copy();
        if (fwhmMm > 0) {
            double sigmaMm = fwhmMm / FWHM_PER_SIGMA;
            smooth(result.values(), grid.nx(), grid.ny() * grid.nz(), sigmaMm / grid.spacingXMm());
            smooth(result.values(), grid.ny(), grid.nz(), sigmaMm / grid.spacingYMm());
            smooth(result.values(), grid.nz(), 1, sigmaMm / grid.spacingZMm());
        }
        return result;
    }

    /** Smooths along the axis that has n voxels at the given stride; rows that share a block of n · stride values lie side by side. */
    private static void smooth(float[] values, int n, int stride, double sigma) {
        double[] weights = weights(Math.min(n - 1, (int) Math.ceil(REACH * sigma)), sigma);
        double[] row = new double[n];
        for (int block = 0; block < values.length; block += n * stride) {
            for (int offset = block; offset < block + stride; offset++) {
                spread(values, offset, stride, weights, row);
            }
        }
    }

    private static double[] weights(int reach, double sigma) {
        double[] weights = new double[reach + 1];
        for (int d = 0; d <= reach; d++) {
            weights[d] = Math.exp(-0.5 * d * d / (sigma * sigma));
        }
        return weights;
    }

    private static void spread(float[] values, int offset, int stride, double[] weights, double[] row) {
        int n = row.length;
        int reach = weights.length - 1;
        Arrays.fill(row, 0);
        for (int source = 0; source < n; source++) {
            float value = values[offset + source * stride];
            if (value == 0) {
                continue;
            }
            int from = Math.max(0, source - reach);
            int to = Math.min(n - 1, source + reach);
            double total = 0;
            for (int i = from; i <= to; i++) {
                total += weights[Math.abs(i - source)];
            }
            for (int i = from; i <= to; i++) {
                row[i] += value / total * weights[Math.abs(i - source)];
            }
        }
        for (int i = 0; i < n; i++) {
            values[offset + i * stride] = (float) row[i];
        }
    }
}
