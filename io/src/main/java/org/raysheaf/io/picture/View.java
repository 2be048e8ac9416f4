package org.raysheaf.io.picture;

import org.raysheaf.geometry.frame.Vector3;

/** A direction to look in, with the world axes that then point right and up. */
enum View {
    /** Along z: x to the right, y up. */
    ALONG_Z(0, 1, 2),
    /** Along x: z to the right, y up. */
    ALONG_X(2, 1, 0),
    /** Along y: z to the right, x up. */
    ALONG_Y(2, 0, 1);

    private static final Vector3[] AXES = {Vector3.X, Vector3.Y, Vector3.Z};

    private final int right;
    private final int up;
    private final int through;

    View(int right, int up, int through) {
        this.right = right;
        this.up = up;
        this.through = through;
    }

    Vector3 right() {
        return AXES[right];
    }

    Vector3 up() {
        return AXES[up];
    }

    /** The axis that is looked along, in its positive direction. */
    Vector3 through() {
        return AXES[through];
    }

    /** The direction towards the eye, such that right, up and this are right-handed. */
    Vector3 towards() {
        return right().cross(up());
    }

    String rightName() {
        return name(right);
    }

    String upName() {
        return name(up);
    }

    String throughName() {
        return name(through);
    }

    private static String name(int axis) {
        return "xyz".substring(axis, axis + 1);
    }
}
