package org.raysheaf.geometry.response;

/**
 * How one crystal answers photons of one direction. A plain holder that is made once and filled again and again. Not safe for use by
 * several threads.
 */
public final class Response {
    double area;
    double u;
    double v;
    double w;
    double variance;

    /** Makes an empty holder. */
    public Response() {}

    /**
     * Effective area: ∫ dA⊥ P(a photon on that line interacts in this crystal).
     *
     * @return the area (mm²)
     */
    public double areaMm2() {
        return area;
    }

    /**
     * Mean interaction point, along the block's u.
     *
     * @return offset from the crystal's centre (mm)
     */
    public double u() {
        return u;
    }

    /**
     * Mean interaction point, along the block's v.
     *
     * @return offset from the crystal's centre (mm)
     */
    public double v() {
        return v;
    }

    /**
     * Mean interaction point, along the block's w.
     *
     * @return offset from the crystal's centre (mm)
     */
    public double w() {
        return w;
    }

    /**
     * Variance of the interaction depth along the photon's direction. The spread that comes from the width of a slanting face is not in it:
     * that is a matter of cutting the element into parts.
     *
     * @return the variance (mm²)
     */
    public double varianceMm2() {
        return variance;
    }
}
