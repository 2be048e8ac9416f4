package org.raysheaf.geometry.solid;

import java.util.List;
import org.apache.commons.rng.UniformRandomProvider;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/** One of every kind of solid, and random lines and poses to try them with. */
final class Zoo {
    private Zoo() {}

    static List<Shape> solids() {
        return List.<Shape>of(
                new Sphere(10),
                new Ellipsoid(new Vector3(7, 10, 4)),
                new Cylinder(6, 14),
                new Cone(8, 3, 12),
                new Cone(0, 6, 15),
                new Cone(5, 0, 4),
                new Cone(5, 5, 12),
                new Box(new Vector3(10, 20, 16)));
    }

    static Vector3 direction(UniformRandomProvider random) {
        double z = random.nextDouble(-1, 1);
        double phi = random.nextDouble(0, 2 * Math.PI);
        double s = Math.sqrt(1 - z * z);
        return new Vector3(s * Math.cos(phi), s * Math.sin(phi), z);
    }

    static Vector3 point(UniformRandomProvider random, double half) {
        return new Vector3(
                random.nextDouble(-half, half), random.nextDouble(-half, half), random.nextDouble(-half, half));
    }

    static Pose pose(UniformRandomProvider random) {
        Pose turn = Pose.rotation(direction(random), random.nextDouble(-Math.PI, Math.PI));
        return Pose.shift(point(random, 30)).after(turn);
    }
}
