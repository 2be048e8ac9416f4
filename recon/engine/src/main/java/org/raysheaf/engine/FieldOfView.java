package org.raysheaf.engine;

import java.util.function.Predicate;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;

/** Where an image may hold activity. Thread-safe. */
public final class FieldOfView {
    private FieldOfView() {}

    /**
     * All points within a radius of the z axis.
     *
     * @param radiusMm the radius (mm)
     * @return the inside of an endless cylinder
     */
    public static Predicate<Vector3> cylinder(double radiusMm) {
        return point -> Math.hypot(point.x(), point.y()) <= radiusMm;
    }

    /**
     * The voxels that can be estimated: those that are seen and whose centre is inside.
     *
     * @param sensitivity sensitivity of each voxel, any unit
     * @param inside says whether a point of the world may hold activity
     * @return an image of 1 (may hold activity) and 0
     */
    public static Image support(Image sensitivity, Predicate<Vector3> inside) {
        Grid grid = sensitivity.grid();
        Image support = new Image(grid);
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    boolean active = sensitivity.at(x, y, z) > 0 && inside.test(grid.centre(x, y, z));
                    support.values()[grid.index(x, y, z)] = active ? 1 : 0;
                }
            }
        }
        return support;
    }
}
