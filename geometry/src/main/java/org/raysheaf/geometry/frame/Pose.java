package org.raysheaf.geometry.frame;

import org.ejml.data.DMatrix3;
import org.ejml.data.DMatrix3x3;
import org.ejml.dense.fixed.CommonOps_DDF3;

/**
 * A rigid placement of a local frame in the world: {@code world = R · local + origin}, with R a proper rotation. The columns of R
 * are the local axes seen from the world. Immutable.
 */
public final class Pose {
    /** The pose that changes nothing. */
    public static final Pose IDENTITY = ofAxes(Vector3.ZERO, Vector3.X, Vector3.Y, Vector3.Z);

    /** Largest departure from orthonormality that is taken for rounding. */
    private static final double ROUNDING = 1e-9;

    private final DMatrix3x3 rotation;
    private final Vector3 origin;

    private Pose(DMatrix3x3 rotation, Vector3 origin) {
        this.rotation = rotation;
        this.origin = origin;
    }

    /**
     * A pose from its axes.
     *
     * @param origin the local origin in the world (mm)
     * @param u the local first axis, a unit vector in the world
     * @param v the local second axis, a unit vector
     * @param w the local third axis, a unit vector
     * @return the pose
     * @throws IllegalArgumentException if the axes are not orthonormal and right-handed within 1e-9
     */
    public static Pose ofAxes(Vector3 origin, Vector3 u, Vector3 v, Vector3 w) {
        double skew = u.cross(v).minus(w).norm() + Math.abs(u.dot(u) - 1) + Math.abs(v.dot(v) - 1);
        if (!(skew < ROUNDING)) {
            throw new IllegalArgumentException(
                    "axes must be orthonormal and right-handed: u=" + u + " v=" + v + " w=" + w);
        }
        return new Pose(new DMatrix3x3(u.x(), v.x(), w.x(), u.y(), v.y(), w.y(), u.z(), v.z(), w.z()), origin);
    }

    /**
     * A pure shift.
     *
     * @param origin where the local origin goes (mm)
     * @return the pose
     */
    public static Pose shift(Vector3 origin) {
        return new Pose(IDENTITY.rotation, origin);
    }

    /**
     * A rotation about an axis through the origin, by the right-hand rule (Rodrigues' formula).
     *
     * @param axis the axis, any length above 0
     * @param angleRad the angle (radians)
     * @return the pose
     */
    public static Pose rotation(Vector3 axis, double angleRad) {
        Vector3 k = axis.unit();
        double c = Math.cos(angleRad);
        double s = Math.sin(angleRad);
        return ofAxes(Vector3.ZERO, turn(Vector3.X, k, c, s), turn(Vector3.Y, k, c, s), turn(Vector3.Z, k, c, s));
    }

    /**
     * Turned about the x axis by the first angle, then about y by the second, then about z by the third (right-hand rule), then moved: how
     * descriptions tell a pose.
     *
     * @param turnDeg the three angles (degrees)
     * @param shiftMm by how much it is moved (mm)
     * @return the pose
     */
    public static Pose turnedAndShifted(Vector3 turnDeg, Vector3 shiftMm) {
        return shift(shiftMm)
                .after(rotation(Vector3.Z, Math.toRadians(turnDeg.z())))
                .after(rotation(Vector3.Y, Math.toRadians(turnDeg.y())))
                .after(rotation(Vector3.X, Math.toRadians(turnDeg.x())));
    }

    private static Vector3 turn(Vector3 a, Vector3 k, double c, double s) {
        return a.times(c).plus(k.cross(a).times(s)).plus(k.times(k.dot(a) * (1 - c)));
    }

    /**
     * First the inner pose, then this one.
     *
     * @param inner the pose that is applied first
     * @return the pose p with {@code p.apply(a) = this.apply(inner.apply(a))}
     */
    public Pose after(Pose inner) {
        DMatrix3x3 product = new DMatrix3x3();
        CommonOps_DDF3.mult(rotation, inner.rotation, product);
        return new Pose(product, apply(inner.origin));
    }

    /**
     * The opposite pose.
     *
     * @return the pose that takes world coordinates to local ones
     */
    public Pose inverse() {
        DMatrix3x3 transposed = new DMatrix3x3();
        CommonOps_DDF3.transpose(rotation, transposed);
        Pose turned = new Pose(transposed, Vector3.ZERO);
        return new Pose(transposed, turned.apply(origin).times(-1));
    }

    /**
     * Takes a point from local to world coordinates.
     *
     * @param local the point in the local frame (mm)
     * @return the point in the world (mm)
     */
    public Vector3 apply(Vector3 local) {
        return turn(local).plus(origin);
    }

    /**
     * Takes a direction or displacement from local to world coordinates; the origin plays no part.
     *
     * @param local the displacement in the local frame
     * @return the displacement in the world
     */
    public Vector3 turn(Vector3 local) {
        DMatrix3 out = new DMatrix3();
        CommonOps_DDF3.mult(rotation, new DMatrix3(local.x(), local.y(), local.z()), out);
        return new Vector3(out.a1, out.a2, out.a3);
    }

    /**
     * The local origin in the world.
     *
     * @return the point (mm)
     */
    public Vector3 origin() {
        return origin;
    }

    /**
     * The local first axis in the world.
     *
     * @return a unit vector
     */
    public Vector3 u() {
        return new Vector3(rotation.a11, rotation.a21, rotation.a31);
    }

    /**
     * The local second axis in the world.
     *
     * @return a unit vector
     */
    public Vector3 v() {
        return new Vector3(rotation.a12, rotation.a22, rotation.a32);
    }

    /**
     * The local third axis in the world.
     *
     * @return a unit vector
     */
    public Vector3 w() {
        return new Vector3(rotation.a13, rotation.a23, rotation.a33);
    }

    @Override
    public boolean equals(Object other) {
        return other instanceof Pose p && u().equals(p.u()) && v().equals(p.v()) && origin.equals(p.origin);
    }

    @Override
    public int hashCode() {
        return 31 * (31 * u().hashCode() + v().hashCode()) + origin.hashCode();
    }

    @Override
    public String toString() {
        return "Pose[origin=" + origin + ", u=" + u() + ", v=" + v() + ", w=" + w() + "]";
    }
}
