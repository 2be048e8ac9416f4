package org.raysheaf.geometry.solid;

import org.raysheaf.geometry.frame.Vector3;

/**
 * A box with edges along the axes.
 *
 * @param low the corner with the smallest coordinates (mm)
 * @param high the corner with the largest coordinates (mm)
 */
public record Bounds(Vector3 low, Vector3 high) {
    /**
     * The middle of the box.
     *
     * @return the point (mm)
     */
    public Vector3 centre() {
        return low.plus(high).times(0.5);
    }

    /**
     * Half the edge lengths.
     *
     * @return the three half extents (mm)
     */
    public Vector3 halfExtents() {
        return high.minus(low).times(0.5);
    }

    /**
     * The smallest box that holds this one and another.
     *
     * @param other the other box
     * @return the common box
     */
    public Bounds with(Bounds other) {
        return new Bounds(
                new Vector3(
                        Math.min(low.x(), other.low.x()),
                        Math.min(low.y(), other.low.y()),
                        Math.min(low.z(), other.low.z())),
                new Vector3(
                        Math.max(high.x(), other.high.x()),
                        Math.max(high.y(), other.high.y()),
                        Math.max(high.z(), other.high.z())));
    }
}
