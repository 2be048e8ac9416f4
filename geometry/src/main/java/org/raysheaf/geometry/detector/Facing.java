package org.raysheaf.geometry.detector;

import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Problems;

/** Turns "this front looks that way" into a block's frame. */
final class Facing {
    /** Largest cosine between facing and rows that still counts as perpendicular: 0.06 degrees. */
    private static final double PERPENDICULAR = 1e-3;

    private Facing() {}

    static void check(Problems problems, Vector3 facing, Vector3 rowsAlong) {
        boolean directions = direction(facing) && direction(rowsAlong);
        problems.rule(direction(facing), "facing", "expected a direction other than [0, 0, 0], found " + facing)
                .rule(
                        direction(rowsAlong),
                        "rows_along",
                        "expected a direction other than [0, 0, 0], found " + rowsAlong)
                .rule(
                        !directions || Math.abs(facing.unit().dot(rowsAlong.unit())) < PERPENDICULAR,
                        "rows_along",
                        "expected a direction perpendicular to facing " + facing + ", found " + rowsAlong);
    }

    private static boolean direction(Vector3 v) {
        return v.norm() > 0 && Double.isFinite(v.norm());
    }

    /** Frame with its origin at the centre of the front, w against the facing direction, v along the rows. */
    static Pose pose(Vector3 centre, Vector3 facing, Vector3 rowsAlong) {
        Vector3 w = facing.unit().times(-1);
        Vector3 v = rowsAlong.minus(w.times(rowsAlong.dot(w))).unit();
        return Pose.ofAxes(centre, v.cross(w), v, w);
    }
}
