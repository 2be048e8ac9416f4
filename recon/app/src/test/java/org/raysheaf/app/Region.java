package org.raysheaf.app;

import java.util.function.Predicate;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;

/** What an image holds in a part of space. */
final class Region {
    private Region() {}

    /** Mean of the voxels whose centres are inside. */
    static double mean(Image image, Predicate<Vector3> inside) {
        Grid grid = image.grid();
        double sum = 0;
        int n = 0;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    if (inside.test(grid.centre(x, y, z))) {
                        sum += image.at(x, y, z);
                        n++;
                    }
                }
            }
        }
        return sum / n;
    }

    /** Between two radii about the z axis and two heights, the lower ones included. */
    static Predicate<Vector3> shell(double fromMm, double toMm, double lowMm, double highMm) {
        return p -> {
            double r = Math.hypot(p.x(), p.y());
            return r >= fromMm && r < toMm && p.z() >= lowMm && p.z() < highMm;
        };
    }

    /** Within a radius of a point. */
    static Predicate<Vector3> ball(Vector3 centre, double radiusMm) {
        return p -> p.minus(centre).norm() <= radiusMm;
    }

    /** Within a radius of the line through (x, 0, 0) along z, so far to both sides. */
    static Predicate<Vector3> rod(double xMm, double radiusMm, double halfLengthMm) {
        return p -> Math.hypot(p.x() - xMm, p.y()) < radiusMm && Math.abs(p.z()) < halfLengthMm;
    }
}
