package org.raysheaf.quality;

import org.raysheaf.geometry.frame.Image;

/**
 * Noise of an image, from the images of the odd and of the even events of the same list. The two halves are independent, so half their
 * difference varies like their mean does:
 *
 * <pre>
 * Var((odd − even) / 2) = (Var odd + Var even) / 4 = Var((odd + even) / 2)
 * </pre>
 *
 * <p>with half the counts, each half has twice the variance of the whole image, so this is the variance of the whole as well, as far as the
 * estimate is linear in the data; list-mode EM is so only approximately, at later passes.
 *
 * @param mean mean of the two halves over the region, in the images' unit
 * @param relativeNoise root mean square of (odd − even) / 2 over the region, divided by the mean: noise of one voxel
 * @param relativeNoiseError standard error of that, 1/√(2n) of it for n voxels taken as independent; neighbours are not, so it is a lower bound
 * @param relativeDifference (mean odd − mean even) / 2, divided by the mean: about the relative error of the region's mean
 * @param voxels voxels in the region
 */
public record HalfDifference(
        double mean, double relativeNoise, double relativeNoiseError, double relativeDifference, int voxels) {
    /**
     * Compares two halves.
     *
     * @param odd the image of the odd events, scaled like the whole
     * @param even the image of the even events, on the same grid
     * @param region values above 0 where to look, on the same grid
     * @return the noise
     * @throws IllegalArgumentException if the grids differ or the region is empty
     */
    public static HalfDifference of(Image odd, Image even, Image region) {
        if (!odd.grid().equals(even.grid()) || !odd.grid().equals(region.grid())) {
            throw new IllegalArgumentException("expected three images on one grid");
        }
        double sum = 0;
        double difference = 0;
        double squares = 0;
        int n = 0;
        for (int j = 0; j < odd.values().length; j++) {
            if (region.values()[j] > 0) {
                double half = 0.5 * ((double) odd.values()[j] - even.values()[j]);
                sum += 0.5 * ((double) odd.values()[j] + even.values()[j]);
                difference += half;
                squares += half * half;
                n++;
            }
        }
        if (n == 0 || !(sum > 0)) {
            throw new IllegalArgumentException("expected a region with activity, found " + n + " voxels");
        }
        double mean = sum / n;
        double noise = Math.sqrt(squares / n) / mean;
        return new HalfDifference(mean, noise, noise / Math.sqrt(2.0 * n), difference / sum, n);
    }
}
