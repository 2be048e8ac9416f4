package org.raysheaf.geometry.response;

/**
 * Where one photon of a pair may have interacted: a law for each of the three coordinates along the axes of its block, seen from the centre of
 * its element (mm). Either what the response says of a photon of that direction, or a measured value with its blur. Filled again and
 * again; belongs to one thread.
 */
final class EndSpread {
    private final double[] frames;
    private final double[] lows = new double[3];
    private final double[] lengths = new double[3];
    private final double[] tilts = new double[3];
    private final double[] measured = new double[3];
    private final double[] blurs = new double[3];
    private int frame;

    EndSpread(double[] frames) {
        this.frames = frames;
    }

    /** Takes up an element, whose laws are not known yet. */
    void stand(int element) {
        frame = ElementFrames.SIZE * element;
    }

    /** The laws of an element for photons that it answers so: within its box, with its mean interaction point. */
    void set(int element, Response response) {
        stand(element);
        set(0, response.u);
        set(1, response.v);
        set(2, response.w);
    }

    private void set(int axis, double mean) {
        double half = frames[frame + ElementFrames.HALF + axis];
        lows[axis] = -half;
        lengths[axis] = 2 * half;
        tilts[axis] = TiltedLaw.tilt((mean + half) / (2 * half));
        blurs[axis] = Double.NaN;
    }

    /**
     * Replaces one law by a measured coordinate with a Gaussian blur. What the blur would put outside the block is folded back in at
     * its face.
     *
     * @param low lower face of the block, from the element's centre
     * @param high upper face
     */
    void measure(int axis, double value, double sd, double low, double high) {
        lows[axis] = low;
        lengths[axis] = high - low;
        measured[axis] = value;
        blurs[axis] = sd;
    }

    /** A coordinate for a stratum of its law. */
    double at(int axis, Strata strata, int stratum) {
        if (Double.isNaN(blurs[axis])) {
            return at(axis, strata.share(stratum));
        }
        double value = measured[axis] + blurs[axis] * strata.normal(stratum);
        return folded(value, lows[axis], lows[axis] + lengths[axis]);
    }

    /** A coordinate folded back in at the faces of a block, and no farther than from face to face. */
    static double folded(double value, double low, double high) {
        double inside = value < low ? 2 * low - value : value > high ? 2 * high - value : value;
        return Math.max(low, Math.min(high, inside));
    }

    /** A coordinate for a share of its law, which must be one of the response. */
    double at(int axis, double share) {
        return lows[axis] + lengths[axis] * TiltedLaw.quantile(tilts[axis], share);
    }

    /** One coordinate in the world of a point given from the element's centre: 0, 1, 2 for x, y, z. */
    double world(int axis, double u, double v, double w) {
        int f = frame + axis;
        return frames[f]
                + u * frames[f + ElementFrames.U]
                + v * frames[f + ElementFrames.V]
                + w * frames[f + ElementFrames.W];
    }
}
