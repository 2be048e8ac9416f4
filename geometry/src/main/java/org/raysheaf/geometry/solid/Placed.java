package org.raysheaf.geometry.solid;

import java.util.function.DoubleSupplier;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/**
 * A solid at another place and in another orientation. Keeps the axes at hand, because lines are clipped in hot loops.
 * Immutable.
 */
public final class Placed implements Solid {
    private final Shape shape;
    private final Pose pose;
    private final Vector3 origin;
    private final Vector3 u;
    private final Vector3 v;
    private final Vector3 w;

    /**
     * Places a solid.
     *
     * @param shape the solid in its own frame
     * @param pose where that frame lies
     */
    public Placed(Shape shape, Pose pose) {
        this.shape = shape;
        this.pose = pose;
        this.origin = pose.origin();
        this.u = pose.u();
        this.v = pose.v();
        this.w = pose.w();
    }

    /**
     * Turns a solid about the world's x axis by the first angle, then about y by the second, then about z by the third (right-hand
     * rule), and moves it.
     *
     * @param shape the solid in its own frame
     * @param turnDeg the three angles (degrees)
     * @param centreMm where its origin goes (mm)
     * @return the placed solid
     */
    public static Placed turned(Shape shape, Vector3 turnDeg, Vector3 centreMm) {
        return new Placed(shape, Pose.turnedAndShifted(turnDeg, centreMm));
    }

    private static double along(Vector3 axis, double x, double y, double z) {
        return axis.x() * x + axis.y() * y + axis.z() * z;
    }

    /**
     * What is placed.
     *
     * @return the solid in its own frame
     */
    public Shape shape() {
        return shape;
    }

    /**
     * Where it is placed.
     *
     * @return the pose of the solid's own frame
     */
    public Pose pose() {
        return pose;
    }

    @Override
    public boolean clip(double ox, double oy, double oz, double dx, double dy, double dz, double[] span) {
        double x = ox - origin.x();
        double y = oy - origin.y();
        double z = oz - origin.z();
        return shape.clip(
                along(u, x, y, z),
                along(v, x, y, z),
                along(w, x, y, z),
                along(u, dx, dy, dz),
                along(v, dx, dy, dz),
                along(w, dx, dy, dz),
                span);
    }

    @Override
    public boolean contains(double worldX, double worldY, double worldZ) {
        double x = worldX - origin.x();
        double y = worldY - origin.y();
        double z = worldZ - origin.z();
        return shape.contains(along(u, x, y, z), along(v, x, y, z), along(w, x, y, z));
    }

    @Override
    public double volumeMm3() {
        return shape.volumeMm3();
    }

    @Override
    public double reach(double ux, double uy, double uz) {
        return shape.reach(along(u, ux, uy, uz), along(v, ux, uy, uz), along(w, ux, uy, uz))
                + along(origin, ux, uy, uz);
    }

    @Override
    public void pick(DoubleSupplier uniform, double[] point) {
        shape.pick(uniform, point);
        double x = point[0];
        double y = point[1];
        double z = point[2];
        point[0] = origin.x() + u.x() * x + v.x() * y + w.x() * z;
        point[1] = origin.y() + u.y() * x + v.y() * y + w.y() * z;
        point[2] = origin.z() + u.z() * x + v.z() * y + w.z() * z;
    }

    @Override
    public String toString() {
        return "Placed[shape=" + shape + ", pose=" + pose + "]";
    }
}
