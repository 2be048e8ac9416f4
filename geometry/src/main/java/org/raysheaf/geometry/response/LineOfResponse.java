package org.raysheaf.geometry.response;

/**
 * A line of response (LOR): where the two photons of a pair interacted on average, and the étendue of the pair. A plain holder that is made
 * once and filled again and again. Not safe for use by several threads.
 */
public final class LineOfResponse {
    double ax;
    double ay;
    double az;
    double bx;
    double by;
    double bz;
    double etendue;

    /** Makes an empty holder. */
    public LineOfResponse() {}

    /**
     * One coordinate of the end at element a.
     *
     * @param axis 0, 1 or 2 for x, y or z
     * @return the coordinate (mm)
     */
    public double a(int axis) {
        return axis == 0 ? ax : axis == 1 ? ay : az;
    }

    /**
     * One coordinate of the end at element b.
     *
     * @param axis 0, 1 or 2 for x, y or z
     * @return the coordinate (mm)
     */
    public double b(int axis) {
        return axis == 0 ? bx : axis == 1 ? by : bz;
    }

    /**
     * Étendue of the pair.
     *
     * @return the étendue (mm² sr)
     */
    public double etendueMm2Sr() {
        return etendue;
    }

    /**
     * Distance between the two ends.
     *
     * @return the length (mm)
     */
    public double lengthMm() {
        return Math.sqrt((bx - ax) * (bx - ax) + (by - ay) * (by - ay) + (bz - az) * (bz - az));
    }
}
