package org.raysheaf.engine.ray;

/**
 * The projector of Joseph (IEEE Transactions on Medical Imaging 1 (1982) 192): a ray takes one sample on every voxel plane across its
 * dominant axis, bilinear between the four voxel centres round it, and each sample counts with the length of the ray between planes.
 * The image is 0 outside the grid.
 *
 * <p>Difference from the publication: a ray ends at its end points (planes beyond them are not visited), and samples within one voxel
 * of the grid's edge count with their inside share, through the border of zeros.
 *
 * <p>Immutable; {@link #back} writes to the accumulator that it is given, which must belong to one thread.
 */
public final class Joseph {
    private Joseph() {}

    /**
     * The weighted line integral of an image along a ray: step · Σ samples.
     *
     * @param walks the rays
     * @param k number of the ray
     * @param image values on the lattice, zeros in the border
     * @return the integral (unit of the image times mm); 0 for an empty walk
     */
    public static float forward(Walks walks, int k, float[] image) {
        int axis = walks.axis(k);
        Lattice lattice = walks.lattice();
        int sw = lattice.stride(axis);
        int su = lattice.stride(axis == 0 ? 1 : 0);
        int sv = lattice.stride(axis == 2 ? 1 : 2);
        float u0 = walks.u[k];
        float du = walks.du[k];
        float v0 = walks.v[k];
        float dv = walks.dv[k];
        int base = walks.first(k) * sw;
        float j = 0;
        float sum = 0;
        for (int left = walks.planes(k); left > 0; left--) {
            float u = u0 + du * j;
            float v = v0 + dv * j;
            int iu = (int) u;
            int iv = (int) v;
            float fu = u - iu;
            float fv = v - iv;
            int at = base + iu * su + iv * sv;
            float q00 = image[at];
            float q01 = image[at + sv];
            float q10 = image[at + su];
            float q11 = image[at + su + sv];
            float a = q00 + fv * (q01 - q00);
            float b = q10 + fv * (q11 - q10);
            sum += a + fu * (b - a);
            base += sw;
            j++;
        }
        return sum * walks.steps[k];
    }

    /**
     * The exact transpose of {@link #forward}: adds amount · (weight of the voxel in the line integral) to every voxel.
     *
     * @param walks the rays
     * @param k number of the ray
     * @param amount what to spread along the ray
     * @param accumulator values on the lattice, added to
     */
    public static void back(Walks walks, int k, float amount, float[] accumulator) {
        int axis = walks.axis(k);
        Lattice lattice = walks.lattice();
        int sw = lattice.stride(axis);
        int su = lattice.stride(axis == 0 ? 1 : 0);
        int sv = lattice.stride(axis == 2 ? 1 : 2);
        float u0 = walks.u[k];
        float du = walks.du[k];
        float v0 = walks.v[k];
        float dv = walks.dv[k];
        float g = amount * walks.steps[k];
        int base = walks.first(k) * sw;
        float j = 0;
        for (int left = walks.planes(k); left > 0; left--) {
            float u = u0 + du * j;
            float v = v0 + dv * j;
            int iu = (int) u;
            int iv = (int) v;
            float fu = u - iu;
            float fv = v - iv;
            int at = base + iu * su + iv * sv;
            float g1 = g * fu;
            float g0 = g - g1;
            float g01 = g0 * fv;
            float g11 = g1 * fv;
            accumulator[at] += g0 - g01;
            accumulator[at + sv] += g01;
            accumulator[at + su] += g1 - g11;
            accumulator[at + su + sv] += g11;
            base += sw;
            j++;
        }
    }

    /** The sample on the j-th plane of a walk, in the same arithmetic as {@link #forward}. */
    static float sample(Walks walks, int k, int j, float[] image) {
        int axis = walks.axis(k);
        Lattice lattice = walks.lattice();
        int su = lattice.stride(axis == 0 ? 1 : 0);
        int sv = lattice.stride(axis == 2 ? 1 : 2);
        float u = walks.u[k] + walks.du[k] * j;
        float v = walks.v[k] + walks.dv[k] * j;
        int at = (walks.first(k) + j) * lattice.stride(axis) + ((int) u) * su + ((int) v) * sv;
        float fu = u - (int) u;
        float fv = v - (int) v;
        float a = image[at] + fv * (image[at + sv] - image[at]);
        float b = image[at + su] + fv * (image[at + su + sv] - image[at + su]);
        return a + fu * (b - a);
    }
}
