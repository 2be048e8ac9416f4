package org.raysheaf.io.volume;

import java.util.List;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/**
 * Where the voxels of a file go in memory. The file's axes become the grid's axes, in the same order, if they are right-handed. If
 * not, one axis is turned round or two are exchanged, whichever brings the grid's axes closest to the world's; each voxel keeps its place
 * in the world.
 *
 * @param grid the grid in memory, always right-handed
 * @param first index in memory of the file's voxel (0, 0, 0)
 * @param stepI what to add to the index for a step along the file's first axis
 * @param stepJ the same along the second axis
 * @param stepK the same along the third axis
 */
record VoxelOrder(Grid grid, int first, int stepI, int stepJ, int stepK) {
    /** Cosine between two axes that is still taken for rounding: 0.01 mm over 100 mm. */
    private static final double SKEW = 1e-4;

    /** Which axis of the file each axis of the grid follows, and whether it runs the other way. */
    private record Choice(int x, int y, int z, int reversed) {
        int source(int axis) {
            return axis == 0 ? x : axis == 1 ? y : z;
        }
    }

    private static final int NONE = -1;
    private static final Choice AS_IS = new Choice(0, 1, 2, NONE);
    private static final List<Choice> MIRRORED = List.of(
            new Choice(0, 1, 2, 0),
            new Choice(0, 1, 2, 1),
            new Choice(0, 1, 2, 2),
            new Choice(1, 0, 2, NONE),
            new Choice(2, 1, 0, NONE),
            new Choice(0, 2, 1, NONE));

    /**
     * Finds the order.
     *
     * @param counts voxels along the file's axes
     * @param affine where they are
     * @throws IllegalArgumentException if the axes are not at right angles, or a spacing or the number of voxels is out of range
     */
    static VoxelOrder of(int[] counts, VoxelAffine affine) {
        Vector3[] steps = {affine.stepI(), affine.stepJ(), affine.stepK()};
        requireRightAngles(steps);
        Choice choice = AS_IS;
        if (steps[0].cross(steps[1]).dot(steps[2]) < 0) {
            double best = Double.NEGATIVE_INFINITY;
            for (Choice mirrored : MIRRORED) {
                double alike = likeness(mirrored, steps);
                if (alike > best) {
                    best = alike;
                    choice = mirrored;
                }
            }
        }
        return arrange(choice, counts, steps, affine.first());
    }

    private static VoxelOrder arrange(Choice choice, int[] counts, Vector3[] steps, Vector3 first) {
        Vector3 centre = first;
        for (int axis = 0; axis < 3; axis++) {
            centre = centre.plus(steps[axis].times(0.5 * (counts[axis] - 1)));
        }
        Vector3 u = step(choice, 0, steps);
        Vector3 v = step(choice, 1, steps);
        Vector3 w = step(choice, 2, steps);
        Grid grid = new Grid(
                counts[choice.x()],
                counts[choice.y()],
                counts[choice.z()],
                u.norm(),
                v.norm(),
                w.norm(),
                orthonormal(centre, u, v));
        int[] strides = {grid.ny() * grid.nz(), grid.nz(), 1};
        int[] fileSteps = new int[3];
        int start = 0;
        for (int axis = 0; axis < 3; axis++) {
            boolean reversed = choice.reversed() == axis;
            fileSteps[choice.source(axis)] = reversed ? -strides[axis] : strides[axis];
            start += reversed ? (counts[choice.source(axis)] - 1) * strides[axis] : 0;
        }
        return new VoxelOrder(grid, start, fileSteps[0], fileSteps[1], fileSteps[2]);
    }

    private static Vector3 step(Choice choice, int axis, Vector3[] steps) {
        return steps[choice.source(axis)].times(choice.reversed() == axis ? -1 : 1);
    }

    private static double likeness(Choice choice, Vector3[] steps) {
        return step(choice, 0, steps).unit().x()
                + step(choice, 1, steps).unit().y()
                + step(choice, 2, steps).unit().z();
    }

    /** Files hold rounded numbers; a pose wants axes that are orthonormal to 1e-9. */
    private static Pose orthonormal(Vector3 centre, Vector3 alongU, Vector3 alongV) {
        Vector3 u = direction(alongU);
        Vector3 v = direction(alongV.minus(u.times(u.dot(alongV))));
        return Pose.ofAxes(centre, u, v, direction(u.cross(v)));
    }

    /** Divides rather than multiplies by the inverse, and adds 0 against −0, so that upright axes come out as exact ones. */
    private static Vector3 direction(Vector3 along) {
        double length = along.norm();
        return new Vector3(along.x() / length + 0.0, along.y() / length + 0.0, along.z() / length + 0.0);
    }

    private static void requireRightAngles(Vector3[] steps) {
        for (Vector3 step : steps) {
            if (!(step.norm() > 0) || !Double.isFinite(step.norm())) {
                throw new IllegalArgumentException("expected a finite voxel spacing > 0, found " + step.norm());
            }
        }
        for (int a = 0; a < 3; a++) {
            double cosine = steps[a].unit().dot(steps[(a + 1) % 3].unit());
            if (!(Math.abs(cosine) < SKEW)) {
                throw new IllegalArgumentException(
                        "expected voxel axes at right angles, found %.3f degrees; resample the volume onto a box-shaped grid"
                                .formatted(Math.toDegrees(Math.acos(cosine))));
            }
        }
    }
}
