package org.raysheaf.geometry.phantom;

import java.util.function.DoubleSupplier;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;
import org.raysheaf.geometry.solid.Placed;
import org.raysheaf.geometry.solid.Shape;

/** Activity without a volume of its own: it stays what it is wherever it lies, and replaces no matter. */
public sealed interface Source permits Source.Point, Source.Line, Source.Surface {
    /** Farthest that a source may stand from the origin (mm). */
    double FARTHEST_MM = 1e4;

    /**
     * How reports call it.
     *
     * @return the name
     */
    String name();

    /**
     * Activity at the start of the acquisition.
     *
     * @return the activity (kBq), greater than 0
     */
    double activityKBq();

    /**
     * Draws the place of a decay.
     *
     * @param uniform a source of uniform numbers in [0, 1)
     * @param point receives x, y, z (mm)
     */
    void pick(DoubleSupplier uniform, double[] point);

    /**
     * A point.
     *
     * @param name how reports call it
     * @param atMm where it is (mm)
     * @param activityKBq its activity (kBq)
     */
    record Point(String name, Vector3 atMm, double activityKBq) implements Source {
        public Point {
            check(name, activityKBq)
                    .within("at_mm", atMm.norm(), 0, FARTHEST_MM)
                    .orThrow();
        }

        @Override
        public void pick(DoubleSupplier uniform, double[] point) {
            point[0] = atMm.x();
            point[1] = atMm.y();
            point[2] = atMm.z();
        }
    }

    /**
     * A straight line, evenly active.
     *
     * @param name how reports call it
     * @param fromMm one end (mm)
     * @param toMm the other end (mm)
     * @param activityKBq its activity (kBq)
     */
    record Line(String name, Vector3 fromMm, Vector3 toMm, double activityKBq) implements Source {
        public Line {
            check(name, activityKBq)
                    .within("from_mm", fromMm.norm(), 0, FARTHEST_MM)
                    .within("to_mm", toMm.norm(), 0, FARTHEST_MM)
                    .orThrow();
        }

        @Override
        public void pick(DoubleSupplier uniform, double[] point) {
            double share = uniform.getAsDouble();
            point[0] = fromMm.x() + share * (toMm.x() - fromMm.x());
            point[1] = fromMm.y() + share * (toMm.y() - fromMm.y());
            point[2] = fromMm.z() + share * (toMm.z() - fromMm.z());
        }
    }

    /**
     * The whole surface of a solid, evenly active.
     *
     * @param name how reports call it
     * @param shape the solid, in its own frame
     * @param centreMm where its centre goes (mm)
     * @param turnDeg how it is turned before it is moved there, like a part of the phantom (degrees)
     * @param activityKBq its activity (kBq)
     */
    record Surface(
            String name,
            Shape shape,
            @Default("[0, 0, 0]") Vector3 centreMm,
            @Default("[0, 0, 0]") Vector3 turnDeg,
            double activityKBq)
            implements Source {
        public Surface {
            check(name, activityKBq)
                    .within("centre_mm", centreMm.norm(), 0, FARTHEST_MM)
                    .finite("turn_deg", turnDeg.norm())
                    .orThrow();
        }

        /**
         * Isotropic, evenly spread lines cross every piece of a convex surface equally often (Cauchy), so the ends of such a line's way
         * through the solid lie evenly on its surface. The line is drawn through a disk that hides the solid's bounding sphere.
         */
        @Override
        public void pick(DoubleSupplier uniform, double[] point) {
            Placed solid = Placed.turned(shape, turnDeg, centreMm);
            double radius = shape.bounds().halfExtents().norm();
            double[] span = new double[2];
            while (true) {
                double z = 2 * uniform.getAsDouble() - 1;
                double angle = 2 * Math.PI * uniform.getAsDouble();
                double r = Math.sqrt(1 - z * z);
                Vector3 direction = new Vector3(r * Math.cos(angle), r * Math.sin(angle), z);
                Vector3 across = Math.abs(z) < 0.9
                        ? direction.cross(Vector3.Z).unit()
                        : direction.cross(Vector3.X).unit();
                double offset = radius * Math.sqrt(uniform.getAsDouble());
                double turn = 2 * Math.PI * uniform.getAsDouble();
                Vector3 start = centreMm.plus(across.times(offset * Math.cos(turn)))
                        .plus(direction.cross(across).times(offset * Math.sin(turn)));
                boolean hit =
                        solid.clip(start.x(), start.y(), start.z(), direction.x(), direction.y(), direction.z(), span);
                double at = uniform.getAsDouble() < 0.5 ? span[0] : span[1];
                if (hit) {
                    point[0] = start.x() + at * direction.x();
                    point[1] = start.y() + at * direction.y();
                    point[2] = start.z() + at * direction.z();
                    return;
                }
            }
        }
    }

    private static Problems check(String name, double activityKBq) {
        return new Problems("source " + name)
                .rule(!name.isBlank(), "name", "expected a name, found an empty text")
                .above("activity_kBq", activityKBq, 0);
    }
}
