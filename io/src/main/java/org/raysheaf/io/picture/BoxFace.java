package org.raysheaf.io.picture;

import java.awt.geom.Path2D;
import java.util.ArrayList;
import java.util.List;
import org.raysheaf.geometry.frame.Vector3;

/**
 * One face of a box.
 *
 * @param corners its four corners in order round it (mm)
 * @param outwards the direction out of the box, a unit vector
 * @param colour number of its colour
 */
record BoxFace(List<Vector3> corners, Vector3 outwards, int colour) {
    private static final int[][] FACES = {
        {0, 1, 2, 3}, {4, 5, 6, 7}, {0, 1, 5, 4}, {1, 2, 6, 5}, {2, 3, 7, 6}, {3, 0, 4, 7}
    };

    /** The faces of a box; a face without area is left out. */
    static List<BoxFace> of(BoxOutline box) {
        Vector3 middle = mean(box.corners());
        List<BoxFace> faces = new ArrayList<>();
        for (int[] face : FACES) {
            List<Vector3> corners = new ArrayList<>();
            for (int corner : face) {
                corners.add(box.corners().get(corner));
            }
            Vector3 normal =
                    corners.get(2).minus(corners.get(0)).cross(corners.get(3).minus(corners.get(1)));
            if (normal.norm() > 0) {
                Vector3 unit = normal.unit();
                boolean outwards = unit.dot(mean(corners).minus(middle)) >= 0;
                faces.add(new BoxFace(corners, outwards ? unit : unit.times(-1), box.colour()));
            }
        }
        return faces;
    }

    Vector3 middle() {
        return mean(corners);
    }

    Path2D shape(Panel panel) {
        Path2D shape = new Path2D.Double();
        shape.moveTo(panel.xOf(corners.get(0)), panel.yOf(corners.get(0)));
        for (Vector3 corner : corners.subList(1, 4)) {
            shape.lineTo(panel.xOf(corner), panel.yOf(corner));
        }
        shape.closePath();
        return shape;
    }

    private static Vector3 mean(List<Vector3> points) {
        Vector3 sum = Vector3.ZERO;
        for (Vector3 point : points) {
            sum = sum.plus(point);
        }
        return sum.times(1.0 / points.size());
    }
}
