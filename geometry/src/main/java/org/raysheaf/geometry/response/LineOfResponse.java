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
    double depthVariance;
    double offset;
    double offsetSd;

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
     * How far the two photons interact from the ends of the line: the variances of both interaction points along the line, added.
     *
     * @return the variance (mm²)
     */
    public double depthVarianceMm2() {
        return depthVariance;
    }

    /**
     * Where on the line the times of an event put the decay. Known only for lines of events, from sheaves with {@link FlightTimes}.
     *
     * @return distance from the middle of the line towards end a (mm)
     */
    public double offsetMm() {
        return offset;
    }

    /**
     * Standard deviation of {@link #offsetMm}.
     *
     * @return the standard deviation (mm)
     */
    public double offsetSdMm() {
        return offsetSd;
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
