package org.raysheaf.io.volume;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/**
 * The affine map from voxel indices to the world: {@code world = first + i · stepI + j · stepJ + k · stepK}. Any handedness.
 *
 * @param stepI displacement from a voxel to its neighbour along the file's first axis (mm)
 * @param stepJ the same along the second axis (mm)
 * @param stepK the same along the third axis (mm)
 * @param first centre of the voxel (0, 0, 0) (mm)
 */
record VoxelAffine(Vector3 stepI, Vector3 stepJ, Vector3 stepK, Vector3 first) {
    static VoxelAffine of(Grid grid) {
        Pose pose = grid.pose();
        return new VoxelAffine(
                pose.u().times(grid.spacingXMm()),
                pose.v().times(grid.spacingYMm()),
                pose.w().times(grid.spacingZMm()),
                grid.centre(0, 0, 0));
    }

    /** Axes along the world's, the middle of the lattice on the origin: what is assumed of a file that says nothing but its spacing. */
    static VoxelAffine centred(int nx, int ny, int nz, Vector3 spacingMm) {
        Vector3 middle = new Vector3(
                0.5 * (nx - 1) * spacingMm.x(), 0.5 * (ny - 1) * spacingMm.y(), 0.5 * (nz - 1) * spacingMm.z());
        return new VoxelAffine(
                Vector3.X.times(spacingMm.x()),
                Vector3.Y.times(spacingMm.y()),
                Vector3.Z.times(spacingMm.z()),
                middle.times(-1));
    }

    /** The map in the first three rows of a matrix. */
    static VoxelAffine ofRows(double[] x, double[] y, double[] z) {
        return new VoxelAffine(
                new Vector3(x[0], y[0], z[0]),
                new Vector3(x[1], y[1], z[1]),
                new Vector3(x[2], y[2], z[2]),
                new Vector3(x[3], y[3], z[3]));
    }

    /** The map as three matrix rows of four. */
    double[][] rows() {
        return new double[][] {
            {stepI.x(), stepJ.x(), stepK.x(), first.x()},
            {stepI.y(), stepJ.y(), stepK.y(), first.y()},
            {stepI.z(), stepJ.z(), stepK.z(), first.z()}
        };
    }

    /** The same map with all lengths multiplied. */
    VoxelAffine scaled(double factor) {
        return new VoxelAffine(stepI.times(factor), stepJ.times(factor), stepK.times(factor), first.times(factor));
    }
}
