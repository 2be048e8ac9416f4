package org.raysheaf.engine.prior;

/**
 * The penalty ψ(a, b) of two neighbouring voxels, symmetric and convex for values of at least 0. The methods on two numbers define it in
 * double precision; those on arrays are the same for all voxels of a run and one neighbour of each, in single precision, in loops
 * that a compiler can turn into vector instructions. Immutable.
 */
public sealed interface PairPotential permits QuadraticPotential, RelativeDifferencePotential, EdgePreservingPotential {
    /**
     * ψ.
     *
     * @param a value of a voxel (Bq/mL)
     * @param b value of its neighbour (Bq/mL)
     * @return ψ(a, b) (Bq/mL)
     */
    double value(double a, double b);

    /**
     * How ψ rises with the first value.
     *
     * @param a value of a voxel (Bq/mL)
     * @param b value of its neighbour (Bq/mL)
     * @return ∂ψ/∂a, no unit
     */
    double slope(double a, double b);

    /**
     * How fast the slope rises with the first value.
     *
     * @param a value of a voxel (Bq/mL)
     * @param b value of its neighbour (Bq/mL)
     * @return ∂²ψ/∂a² (1/(Bq/mL)), not below 0
     */
    double curvature(double a, double b);

    /**
     * Adds w · m_k · ∂ψ/∂x_j to out_j for the voxels j of a run and their neighbours k = j + offset.
     *
     * @param x the image
     * @param mask m: 1 where there may be activity, else 0
     * @param first first voxel
     * @param last after the last voxel
     * @param offset from a voxel to its neighbour
     * @param weight w
     * @param out added to
     */
    void addSlopes(float[] x, float[] mask, int first, int last, int offset, float weight, float[] out);

    /**
     * Adds w · m_k · ∂²ψ/∂x_j² to out_j for the voxels j of a run and their neighbours k = j + offset.
     *
     * @param x the image
     * @param mask m: 1 where there may be activity, else 0
     * @param first first voxel
     * @param last after the last voxel
     * @param offset from a voxel to its neighbour
     * @param weight w
     * @param out added to
     */
    void addCurvatures(float[] x, float[] mask, int first, int last, int offset, float weight, float[] out);
}
