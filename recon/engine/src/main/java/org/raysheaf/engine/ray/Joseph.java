package org.raysheaf.engine.ray;

/**
 * The projector of Joseph (IEEE Transactions on Medical Imaging 1 (1982) 192): a ray takes one sample on every voxel plane across its
 * dominant axis, bilinear between the four voxel centres round it, and each sample counts with the length of the ray between planes.
 * The image is 0 outside the grid.
 *
 * <p>Difference from the publication: a ray ends at its end points (planes beyond them are not visited), and samples within one voxel
 * of the grid's edge count with their inside share, through the border of zeros.
 *
 * <p>Holds one ray at a time: {@link #aim} finds where its samples lie, then {@link #forward} and {@link #back} go along it as often as
 * wanted. Belongs to one thread.
 */
public final class Joseph {
    /**
     * Adding this to a number between −2²² and 2²² rounds it to a whole number, which then stands in the lowest bits of the sum. Unlike
     * a conversion to int, that can be done for eight planes at once, and needs no test for numbers out of range.
     */
    private static final float ROUNDING = 3 << 22;

    /** e^(−0.14). */
    private static final float AT_CENTRE = 0.8693582f;

    private static final int ROUNDING_BITS = Float.floatToRawIntBits(ROUNDING);

    private final Lattice lattice;
    /** 0, 1, 2, … as floats: a table, because the loop over it becomes vector instructions and one that counts does not. */
    private final float[] counting;

    private final float[] roundedU;
    private final float[] roundedV;
    /** Per plane: where the lower voxel of the sample lies, and how far the sample is from there to the next voxel along u and v. */
    private final int[] lowers;

    private final float[] fractionsU;
    private final float[] fractionsV;
    /** Per plane of a timed ray: its weight, 1 where the density is highest. */
    private final float[] weights;

    private int planes;
    private boolean timed;
    private int strideU;
    private int strideV;
    private float step;

    /**
     * A projector that is not yet aimed.
     *
     * @param lattice what its rays walk through
     */
    public Joseph(Lattice lattice) {
        this.lattice = lattice;
        int most = Math.max(lattice.planes(0), Math.max(lattice.planes(1), lattice.planes(2)));
        counting = new float[most];
        for (int j = 0; j < most; j++) {
            counting[j] = j;
        }
        roundedU = new float[most];
        roundedV = new float[most];
        lowers = new int[most];
        fractionsU = new float[most];
        fractionsV = new float[most];
        weights = new float[most];
    }

    /**
     * Takes up a ray.
     *
     * @param walks rays through this projector's lattice
     * @param k number of the ray
     */
    public void aim(Walks walks, int k) {
        int axis = walks.axis(k);
        planes = walks.planes(k);
        step = walks.steps[k];
        strideU = lattice.stride(axis == 0 ? 1 : 0);
        strideV = lattice.stride(axis == 2 ? 1 : 2);
        sample(planes, counting, walks.u[k], walks.du[k], roundedU, fractionsU);
        sample(planes, counting, walks.v[k], walks.dv[k], roundedV, fractionsV);
        locate(walks.first(k) * lattice.stride(axis), lattice.stride(axis));
        timed = walks.timed();
        if (timed) {
            weigh(planes, counting, walks.centres[k], walks.sharpness[k], weights);
        }
    }

    /**
     * The weights e^(−y), y = ½ ((j − centre) · sharpness)², of planes within {@link Walks#REACH} widths of the centre, so that y ≤ 4.5. From
     * the Taylor series of e^(0.14 − y/16), the argument of which is at most 0.142 either way (error below 10⁻⁷ after six terms, and 1.2·10⁻⁷
     * in single precision), and four squarings, which make that 16 times larger: 4·10⁻⁶. In this form eight planes are done at once;
     * a recurrence from plane to plane would wait for itself, and lose digits along the way.
     */
    static void weigh(int planes, float[] counting, float centre, float sharpness, float[] weights) {
        float scale = 0.17677669f * sharpness; // √(½ / 16)
        float start = -centre * scale;
        for (int j = 0; j < planes; j++) {
            float x = start + scale * counting[j];
            float z = 0.14f - x * x;
            float e =
                    AT_CENTRE * (1 + z * (1 + z * (0.5f + z * (0.16666667f + z * (0.041666668f + z * 0.008333334f)))));
            e *= e;
            e *= e;
            e *= e;
            weights[j] = e * e;
        }
    }

    /** Splits the coordinates start + j · slope into the voxel below, still offset by ROUNDING, and the rest. */
    static void sample(int planes, float[] counting, float start, float slope, float[] rounded, float[] fractions) {
        float shifted = start - 0.5f;
        for (int j = 0; j < planes; j++) {
            float x = shifted + slope * counting[j];
            float r = x + ROUNDING;
            rounded[j] = r;
            fractions[j] = x - (r - ROUNDING) + 0.5f;
        }
    }

    private void locate(int firstPlane, int strideW) {
        int plane = firstPlane - ROUNDING_BITS * (strideU + strideV); // whole numbers wrap round, so the offsets cancel
        for (int j = 0; j < planes; j++) {
            lowers[j] = plane
                    + Float.floatToRawIntBits(roundedU[j]) * strideU
                    + Float.floatToRawIntBits(roundedV[j]) * strideV;
            plane += strideW;
        }
    }

    /**
     * The weighted line integral of an image along the ray: step · Σ samples, each times its density if the ray is timed.
     *
     * @param image values on the lattice, zeros in the border
     * @return the integral (unit of the image times mm, or unit of the image if timed); 0 if the walk is empty
     */
    public float forward(float[] image) {
        if (timed) {
            return step * (strideV == 1 ? timedSum(image, 1) : timedSum(image, strideV));
        }
        // A constant stride lets the compiler test the bounds of two neighbours at once.
        return step * (strideV == 1 ? sum(image, 1) : sum(image, strideV));
    }

    private float sum(float[] image, int next) {
        float sum = 0;
        for (int j = 0; j < planes; j++) {
            int low = lowers[j];
            int high = low + strideU;
            float fv = fractionsV[j];
            float a = image[low] + fv * (image[low + next] - image[low]);
            float b = image[high] + fv * (image[high + next] - image[high]);
            sum += a + fractionsU[j] * (b - a);
        }
        return sum;
    }

    private float timedSum(float[] image, int next) {
        float sum = 0;
        for (int j = 0; j < planes; j++) {
            int low = lowers[j];
            int high = low + strideU;
            float fv = fractionsV[j];
            float a = image[low] + fv * (image[low + next] - image[low]);
            float b = image[high] + fv * (image[high + next] - image[high]);
            sum += weights[j] * (a + fractionsU[j] * (b - a));
        }
        return sum;
    }

    /**
     * The exact transpose of {@link #forward}: adds amount · (weight of the voxel in the line integral) to every voxel.
     *
     * @param amount what to spread along the ray
     * @param accumulator values on the lattice, added to
     */
    public void back(float amount, float[] accumulator) {
        if (timed) {
            if (strideV == 1) {
                timedSpread(amount * step, accumulator, 1);
            } else {
                timedSpread(amount * step, accumulator, strideV);
            }
        } else if (strideV == 1) {
            spread(amount * step, accumulator, 1);
        } else {
            spread(amount * step, accumulator, strideV);
        }
    }

    private void spread(float amount, float[] accumulator, int next) {
        for (int j = 0; j < planes; j++) {
            int low = lowers[j];
            int high = low + strideU;
            float b = amount * fractionsU[j];
            float a = amount - b;
            float aNext = a * fractionsV[j];
            float bNext = b * fractionsV[j];
            accumulator[low] += a - aNext;
            accumulator[low + next] += aNext;
            accumulator[high] += b - bNext;
            accumulator[high + next] += bNext;
        }
    }

    private void timedSpread(float whole, float[] accumulator, int next) {
        for (int j = 0; j < planes; j++) {
            int low = lowers[j];
            int high = low + strideU;
            float amount = whole * weights[j];
            float b = amount * fractionsU[j];
            float a = amount - b;
            float aNext = a * fractionsV[j];
            float bNext = b * fractionsV[j];
            accumulator[low] += a - aNext;
            accumulator[low + next] += aNext;
            accumulator[high] += b - bNext;
            accumulator[high + next] += bNext;
        }
    }
}
