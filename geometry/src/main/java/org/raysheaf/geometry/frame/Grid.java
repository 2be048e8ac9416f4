package org.raysheaf.geometry.frame;

import org.raysheaf.geometry.settings.Problems;

/**
 * A regular lattice of box-shaped voxels, placed in the world. The local frame of {@link #pose()} has its origin at the centre of
 * the lattice and its axes along the voxel axes.
 *
 * <p>This is the only place that knows how voxels lie in memory: z runs fastest, then y, then x, because in a ring scanner most rays
 * step along x or y and the two axial neighbours that each step samples then share a cache line.
 *
 * @param nx voxels along the first axis, at least 1
 * @param ny voxels along the second axis, at least 1
 * @param nz voxels along the third axis, at least 1
 * @param spacingXMm voxel pitch along the first axis (mm), greater than 0
 * @param spacingYMm voxel pitch along the second axis (mm), greater than 0
 * @param spacingZMm voxel pitch along the third axis (mm), greater than 0
 * @param pose centre and orientation
 */
public record Grid(int nx, int ny, int nz, double spacingXMm, double spacingYMm, double spacingZMm, Pose pose) {
    public Grid {
        new Problems("grid")
                .atLeast("nx", nx, 1)
                .atLeast("ny", ny, 1)
                .atLeast("nz", nz, 1)
                .above("spacing_x_mm", spacingXMm, 0)
                .above("spacing_y_mm", spacingYMm, 0)
                .above("spacing_z_mm", spacingZMm, 0)
                .rule(
                        (double) nx * ny * nz < Integer.MAX_VALUE - 8,
                        "nx, ny, nz",
                        "expected fewer than 2^31 voxels, found " + (double) nx * ny * nz + "; take larger voxels")
                .orThrow();
    }

    /**
     * A grid of cubes centred on the world's origin, axes along the world's.
     *
     * @param nx voxels along x
     * @param ny voxels along y
     * @param nz voxels along z
     * @param spacingMm edge of a voxel (mm)
     * @return the grid
     */
    public static Grid centred(int nx, int ny, int nz, double spacingMm) {
        return new Grid(nx, ny, nz, spacingMm, spacingMm, spacingMm, Pose.IDENTITY);
    }

    /**
     * Number of voxels.
     *
     * @return nx · ny · nz
     */
    public int voxels() {
        return nx * ny * nz;
    }

    /**
     * Where a voxel lies in an array of values.
     *
     * @param x index along the first axis, 0 to nx − 1
     * @param y index along the second axis, 0 to ny − 1
     * @param z index along the third axis, 0 to nz − 1
     * @return (x · ny + y) · nz + z
     */
    public int index(int x, int y, int z) {
        return (x * ny + y) * nz + z;
    }

    /**
     * Volume of one voxel.
     *
     * @return the volume (mm³)
     */
    public double voxelVolumeMm3() {
        return spacingXMm * spacingYMm * spacingZMm;
    }

    /**
     * Centre of a voxel in the world. Fractional indices are allowed.
     *
     * @param x index along the first axis
     * @param y index along the second axis
     * @param z index along the third axis
     * @return the point (mm)
     */
    public Vector3 centre(double x, double y, double z) {
        return pose.apply(new Vector3(
                (x - 0.5 * (nx - 1)) * spacingXMm,
                (y - 0.5 * (ny - 1)) * spacingYMm,
                (z - 0.5 * (nz - 1)) * spacingZMm));
    }

    /**
     * Fractional voxel indices of a point; voxel centres have whole numbers.
     *
     * @param world a point in the world (mm)
     * @return the three indices; outside the grid they lie beyond −0.5 and n − 0.5
     */
    public Vector3 indices(Vector3 world) {
        Vector3 local = pose.inverse().apply(world);
        return new Vector3(
                local.x() / spacingXMm + 0.5 * (nx - 1),
                local.y() / spacingYMm + 0.5 * (ny - 1),
                local.z() / spacingZMm + 0.5 * (nz - 1));
    }
}
