package org.raysheaf.engine;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/** Images from one grid to another, for estimates that start from what is there already. Thread-safe. */
public final class OtherGrid {
    private OtherGrid() {}

    /**
     * Voxels of twice the size along every axis that cover a grid; voxel i along an axis holds the voxels 2i and 2i + 1.
     *
     * @param fine the grid to be covered
     * @return the coarse grid; where the fine one has an odd number of voxels it reaches half a coarse voxel further
     */
    public static Grid doubled(Grid fine) {
        int nx = (fine.nx() + 1) / 2;
        int ny = (fine.ny() + 1) / 2;
        int nz = (fine.nz() + 1) / 2;
        Vector3 origin = fine.centre(nx - 0.5, ny - 0.5, nz - 0.5);
        Pose pose = Pose.ofAxes(
                origin, fine.pose().u(), fine.pose().v(), fine.pose().w());
        return new Grid(nx, ny, nz, 2 * fine.spacingXMm(), 2 * fine.spacingYMm(), 2 * fine.spacingZMm(), pose);
    }

    /**
     * Adds up amounts per voxel, such as sensitivities, in the voxels of {@link #doubled}.
     *
     * @param fine amounts per voxel
     * @return the same amounts on the doubled grid
     */
    public static Image summed(Image fine) {
        Grid from = fine.grid();
        Image coarse = new Image(doubled(from));
        for (int x = 0; x < from.nx(); x++) {
            for (int y = 0; y < from.ny(); y++) {
                for (int z = 0; z < from.nz(); z++) {
                    coarse.values()[coarse.grid().index(x / 2, y / 2, z / 2)] += fine.at(x, y, z);
                }
            }
        }
        return coarse;
    }

    /**
     * Interpolates densities, such as activity concentrations, linearly between voxel centres; up to half a voxel beyond the outermost centres the
     * value of the nearest ones holds, further out it is 0.
     *
     * @param image densities
     * @param onto where they are wanted
     * @return densities at the voxel centres of the other grid
     */
    public static Image interpolated(Image image, Grid onto) {
        Image result = new Image(onto);
        for (int x = 0; x < onto.nx(); x++) {
            for (int y = 0; y < onto.ny(); y++) {
                for (int z = 0; z < onto.nz(); z++) {
                    result.values()[onto.index(x, y, z)] =
                            (float) at(image, image.grid().indices(onto.centre(x, y, z)));
                }
            }
        }
        return result;
    }

    private static double at(Image image, Vector3 place) {
        Grid grid = image.grid();
        if (!(inside(place.x(), grid.nx()) && inside(place.y(), grid.ny()) && inside(place.z(), grid.nz()))) {
            return 0;
        }
        double sum = 0;
        for (int corner = 0; corner < 8; corner++) {
            double weight = 1;
            int[] index = new int[3];
            for (int axis = 0; axis < 3; axis++) {
                double along = axis == 0 ? place.x() : axis == 1 ? place.y() : place.z();
                int voxels = axis == 0 ? grid.nx() : axis == 1 ? grid.ny() : grid.nz();
                int side = corner >> axis & 1;
                int below = (int) Math.floor(along);
                weight *= side == 1 ? along - below : 1 - (along - below);
                index[axis] = Math.max(0, Math.min(voxels - 1, below + side));
            }
            if (weight > 0) {
                sum += weight * image.at(index[0], index[1], index[2]);
            }
        }
        return sum;
    }

    private static boolean inside(double along, int voxels) {
        double rounding = 1e-9 * voxels;
        return along >= -0.5 - rounding && along <= voxels - 0.5 + rounding;
    }
}
