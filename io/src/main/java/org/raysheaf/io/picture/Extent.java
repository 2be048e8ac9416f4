package org.raysheaf.io.picture;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Vector3;

/**
 * A box along the world's axes.
 *
 * @param low the corner with the smallest coordinates (mm)
 * @param high the corner with the largest (mm)
 */
record Extent(Vector3 low, Vector3 high) {
    /** The smallest box that holds all voxels of a grid. */
    static Extent of(Grid grid) {
        Extent extent = ofPoint(grid.centre(-0.5, -0.5, -0.5));
        for (int corner = 1; corner < 8; corner++) {
            extent = extent.with(grid.centre(
                    (corner & 1) * grid.nx() - 0.5,
                    (corner >> 1 & 1) * grid.ny() - 0.5,
                    (corner >> 2) * grid.nz() - 0.5));
        }
        return extent;
    }

    static Extent ofPoint(Vector3 point) {
        return new Extent(point, point);
    }

    Extent with(Vector3 point) {
        return new Extent(
                new Vector3(Math.min(low.x(), point.x()), Math.min(low.y(), point.y()), Math.min(low.z(), point.z())),
                new Vector3(
                        Math.max(high.x(), point.x()), Math.max(high.y(), point.y()), Math.max(high.z(), point.z())));
    }

    Extent grownBy(double mm) {
        Vector3 all = new Vector3(mm, mm, mm);
        return new Extent(low.minus(all), high.plus(all));
    }

    Vector3 size() {
        return high.minus(low);
    }
}
