package org.raysheaf.geometry.solid;

import java.util.function.DoubleSupplier;
import org.raysheaf.geometry.frame.Vector3;

/**
 * A convex body with a surface known in closed form. Because it is convex, a line meets it in one segment or not at
 * all. Any NaN makes the answer "no".
 */
public sealed interface Solid permits Shape, Placed {
    /**
     * Finds where a line runs inside the solid. Allocates nothing.
     *
     * <p>A line that only touches the solid (a tangent, or a line within a flat face) does not run inside it; nor does
     * a "line" without a direction.
     *
     * @param ox a point of the line (mm)
     * @param oy a point of the line (mm)
     * @param oz a point of the line (mm)
     * @param dx direction, any length from 1e-100 to 1e100
     * @param dy direction
     * @param dz direction
     * @param span receives the parameters of entry and exit in its first two entries, entry below exit, either sign; of
     *     no meaning if the answer is false
     * @return whether a segment longer than 0 lies inside
     */
    boolean clip(double ox, double oy, double oz, double dx, double dy, double dz, double[] span);

    /**
     * Whether a point lies in the solid or on its surface.
     *
     * @param x the point (mm)
     * @param y the point (mm)
     * @param z the point (mm)
     * @return true if it does; points within rounding of the surface may go either way
     */
    boolean contains(double x, double y, double z);

    /**
     * Volume.
     *
     * @return the volume (mm³)
     */
    double volumeMm3();

    /**
     * How far the solid reaches in a direction: the largest value of u · p over its points p (its support function).
     *
     * @param ux the direction u; for a unit vector the result is a distance from the origin
     * @param uy the direction
     * @param uz the direction
     * @return max u · p (mm for a unit vector)
     */
    double reach(double ux, double uy, double uz);

    /**
     * Draws a point uniformly from the volume, exactly and without rejection. Takes three numbers from the generator.
     *
     * @param uniform a source of uniform numbers in [0, 1)
     * @param point receives x, y, z (mm) in its first three entries
     */
    void pick(DoubleSupplier uniform, double[] point);

    /**
     * Length of a line inside the solid. Convenient where speed does not matter; hot loops use {@link #clip}.
     *
     * @param point a point of the line (mm)
     * @param direction direction, any length
     * @return the length (mm), 0 if the line misses
     */
    default double chord(Vector3 point, Vector3 direction) {
        double[] span = new double[2];
        boolean hit = clip(point.x(), point.y(), point.z(), direction.x(), direction.y(), direction.z(), span);
        return hit ? (span[1] - span[0]) * direction.norm() : 0;
    }

    /**
     * The smallest box with edges along the axes of the frame in use that holds the solid.
     *
     * @return the box
     */
    default Bounds bounds() {
        return new Bounds(
                new Vector3(-reach(-1, 0, 0), -reach(0, -1, 0), -reach(0, 0, -1)),
                new Vector3(reach(1, 0, 0), reach(0, 1, 0), reach(0, 0, 1)));
    }
}
