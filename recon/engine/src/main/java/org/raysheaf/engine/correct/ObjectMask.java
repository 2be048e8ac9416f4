package org.raysheaf.engine.correct;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/** Where the object is, with a margin: lines that miss it can hold no true pair. */
final class ObjectMask {
    /** Lines clear of the object keep this distance from it (mm): crystals are sometimes mistaken for their neighbours. */
    private static final double CLEARANCE_MM = 5;

    private static final double VOXEL_MM = 2;

    /** Voxels below this share of the largest attenuation are no object. */
    private static final double DENSE = 0.1;

    private ObjectMask() {}

    /** At least 1 within {@value #CLEARANCE_MM} mm of dense matter, 0 elsewhere. */
    static Image around(Image mu) {
        Grid fine = mu.grid();
        double half = 0.5
                * Math.max(
                        fine.nx() * fine.spacingXMm(),
                        Math.max(fine.ny() * fine.spacingYMm(), fine.nz() * fine.spacingZMm()));
        int reach = (int) Math.ceil(CLEARANCE_MM / VOXEL_MM);
        int n = (int) Math.ceil(2 * Math.sqrt(3) * half / VOXEL_MM) + 2 * reach + 2;
        n = Math.min(n, 400);
        Grid grid = new Grid(
                n, n, n, VOXEL_MM, VOXEL_MM, VOXEL_MM, Pose.shift(fine.pose().origin()));
        Image mask = new Image(grid);
        float most = 0;
        for (float value : mu.values()) {
            most = Math.max(most, value);
        }
        for (int x = 0; x < fine.nx(); x++) {
            for (int y = 0; y < fine.ny(); y++) {
                for (int z = 0; z < fine.nz(); z++) {
                    if (mu.at(x, y, z) > DENSE * most) {
                        mark(mask, grid.indices(fine.centre(x, y, z)), reach);
                    }
                }
            }
        }
        return mask;
    }

    private static void mark(Image mask, Vector3 index, int reach) {
        Grid grid = mask.grid();
        int x0 = (int) Math.rint(index.x());
        int y0 = (int) Math.rint(index.y());
        int z0 = (int) Math.rint(index.z());
        boolean inside = x0 >= 0 && y0 >= 0 && z0 >= 0 && x0 < grid.nx() && y0 < grid.ny() && z0 < grid.nz();
        if (!inside || mask.at(x0, y0, z0) > 1) {
            return; // this voxel was spread before
        }
        for (int x = Math.max(0, x0 - reach); x <= Math.min(grid.nx() - 1, x0 + reach); x++) {
            for (int y = Math.max(0, y0 - reach); y <= Math.min(grid.ny() - 1, y0 + reach); y++) {
                for (int z = Math.max(0, z0 - reach); z <= Math.min(grid.nz() - 1, z0 + reach); z++) {
                    int at = grid.index(x, y, z);
                    mask.values()[at] = Math.max(1, mask.values()[at]);
                }
            }
        }
        mask.values()[grid.index(x0, y0, z0)] = 2;
    }
}
