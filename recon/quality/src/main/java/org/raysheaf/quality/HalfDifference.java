package org.raysheaf.quality;

import java.util.OptionalDouble;
import org.raysheaf.geometry.frame.Image;

/**
 * Noise of an image, from the images of the odd and of the even events of the same list. The two halves are independent, so half their
 * difference d varies like their mean m does:
 *
 * <pre>
 * Var((odd − even) / 2) = (Var odd + Var even) / 4 = Var((odd + even) / 2)
 * </pre>
 *
 * <p>with half the counts, each half has twice the variance of the whole image, so this is the variance of the whole as well, as far as the
 * estimate is linear in the data; list-mode EM is so only approximately, at later passes.
 *
 * <p>The figure is the root mean square of d/m over all voxels j with activity, each weighted by its activity:
 *
 * <pre>
 * noise² = Σ_j m_j (d_j / m_j)² / Σ_j m_j = Σ_j (d_j² / m_j) / Σ_j m_j
 * </pre>
 *
 * <p>No threshold is in it, hence no voxel on which the choice of others hangs. Since m is noisy too, a noise of ε comes out wrong by
 * about ε²/2 of itself, low or high according to its distribution; since halves are not negative it cannot come out above 1, so from
 * about 0.7 on it only says that the image is mostly noise.
 *
 * <p>The standard error comes from leaving out one block of the volume after another (delete-one jackknife: Efron &amp; Stein (1981), The
 * jackknife estimate of variance, Annals of Statistics 9, eq. 1.4): neighbouring voxels have noise in common, blocks that are large against
 * the length of that correlation hardly. What correlation crosses the faces of blocks is left out.
 *
 * @param relativeNoise noise of one voxel divided by its activity
 * @param standardError standard error of that; empty if the activity sits in fewer than 5 blocks
 * @param relativeDifference (Σ odd − Σ even) / (Σ odd + Σ even): about the relative error of the image's sum
 * @param correlationMm full width at half maximum of the noise's correlation (mm), on the axis where it is widest
 * @param blockMm longest edge of a block (mm)
 * @param blocks number of equally active blocks that would weigh as the blocks here do: (Σ w)² / Σ w²
 */
public record HalfDifference(
        double relativeNoise,
        OptionalDouble standardError,
        double relativeDifference,
        double correlationMm,
        double blockMm,
        double blocks) {
    /** From fewer blocks the error itself would be known to no better than a third. */
    private static final double FEWEST_BLOCKS = 5;

    /**
     * Compares two halves.
     *
     * @param odd the image of the odd events, scaled like the whole
     * @param even the image of the even events, on the same grid
     * @return the noise
     * @throws IllegalArgumentException if the grids differ, a value is not finite, or there is no activity
     */
    public static HalfDifference of(Image odd, Image even) {
        if (!odd.grid().equals(even.grid())) {
            throw new IllegalArgumentException("expected two images on one grid");
        }
        double sumOdd = finiteSum(odd);
        double sumEven = finiteSum(even);
        double correlationMm = NoiseCorrelation.widthMm(scaled(odd, even), odd.grid());
        NoiseBlocks blocks = new NoiseBlocks(odd, even, correlationMm);
        if (!(blocks.weight() > 0)) {
            throw new IllegalArgumentException(
                    "expected halves with activity, found sums of " + sumOdd + " and " + sumEven);
        }
        double effective = blocks.effective();
        return new HalfDifference(
                blocks.noise(),
                effective >= FEWEST_BLOCKS ? OptionalDouble.of(blocks.jackknifeError()) : OptionalDouble.empty(),
                (sumOdd - sumEven) / (sumOdd + sumEven),
                correlationMm,
                blocks.edgeMm(),
                effective);
    }

    private static double finiteSum(Image image) {
        double sum = image.sum();
        if (!Double.isFinite(sum)) {
            throw new IllegalArgumentException("expected halves of finite values, found a sum of " + sum);
        }
        return sum;
    }

    /** d/√m, which has about the same variance in bright and in dim voxels; 0 where there is no activity. */
    private static float[] scaled(Image odd, Image even) {
        float[] scaled = new float[odd.values().length];
        for (int j = 0; j < scaled.length; j++) {
            double mean = 0.5 * ((double) odd.values()[j] + even.values()[j]);
            double half = 0.5 * ((double) odd.values()[j] - even.values()[j]);
            scaled[j] = mean > 0 ? (float) (half / Math.sqrt(mean)) : 0;
        }
        return scaled;
    }
}
