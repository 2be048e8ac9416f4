package org.raysheaf.quality;

import org.raysheaf.geometry.frame.Grid;

/** How far the noise of one voxel reaches: the width of the autocorrelation ρ(k) = Σ_j z_j z_(j+k) / Σ_j z_j² along the axes. */
final class NoiseCorrelation {
    private NoiseCorrelation() {}

    /**
     * Full width at half maximum of the autocorrelation, on the axis where it is widest.
     *
     * @param noise one value per voxel, of mean 0
     * @param grid the voxels
     * @return the width (mm); one voxel if neighbours have nothing in common
     */
    static double widthMm(float[] noise, Grid grid) {
        double alongX = halfWidth(noise, grid.nx(), grid.ny() * grid.nz()) * grid.spacingXMm();
        double alongY = halfWidth(noise, grid.ny(), grid.nz()) * grid.spacingYMm();
        double alongZ = halfWidth(noise, grid.nz(), 1) * grid.spacingZMm();
        return 2 * Math.max(alongX, Math.max(alongY, alongZ));
    }

    /** The lag (voxels) at which the autocorrelation passes 1/2, between lags by a straight line; all of the axis if it never does. */
    private static double halfWidth(float[] noise, int count, int stride) {
        double before = 1;
        double none = correlation(noise, count, stride, 0);
        for (int lag = 1; none > 0 && lag < count; lag++) {
            double here = correlation(noise, count, stride, lag) / none;
            if (here < 0.5) {
                return lag - 1 + (before - 0.5) / (before - here);
            }
            before = here;
        }
        return none > 0 ? count : 0.5;
    }

    private static double correlation(float[] noise, int count, int stride, int lag) {
        double sum = 0;
        for (int j = 0; j + lag * stride < noise.length; j++) {
            if (j / stride % count + lag < count) {
                sum += (double) noise[j] * noise[j + lag * stride];
            }
        }
        return sum;
    }
}
