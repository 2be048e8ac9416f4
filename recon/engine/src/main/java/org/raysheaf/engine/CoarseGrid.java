package org.raysheaf.engine;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;

/** Larger voxels in place of a grid's own, for images that are smooth enough to be interpolated. */
public final class CoarseGrid {
    /** Voxels beyond the fine grid's edge on every side, which interpolation near the edge reaches for. */
    private static final int RIM = 2;

    private CoarseGrid() {}

    /**
     * A grid of larger voxels that covers another, with the same pose.
     *
     * @param fine the grid to be covered
     * @param spacingMm edge of its voxels (mm), at least that of the fine grid along every axis
     * @return the coarse grid
     */
    public static Grid around(Grid fine, double spacingMm) {
        return new Grid(
                voxels(fine.nx() * fine.spacingXMm(), spacingMm),
                voxels(fine.ny() * fine.spacingYMm(), spacingMm),
                voxels(fine.nz() * fine.spacingZMm(), spacingMm),
                spacingMm,
                spacingMm,
                spacingMm,
                fine.pose());
    }

    private static int voxels(double lengthMm, double spacingMm) {
        return (int) Math.ceil(lengthMm / spacingMm) + 2 * RIM;
    }

    /**
     * Interpolates an image of amounts per voxel by cubic convolution (Keys, IEEE Transactions on Acoustics, Speech, and Signal Processing
     * 29 (1981) 1153, a = −1/2), which is exact for polynomials of second degree; scaled to the volume of the new voxels.
     *
     * @param coarse values on a grid from {@link #around}
     * @param fine where they are wanted
     * @return amounts per voxel of the fine grid, none below 0
     */
    public static Image interpolate(Image coarse, Grid fine) {
        Grid from = coarse.grid();
        Image image = new Image(fine);
        double scale = fine.voxelVolumeMm3() / from.voxelVolumeMm3();
        Weights[] alongX = weights(fine.nx(), fine.spacingXMm(), from.nx(), from.spacingXMm());
        Weights[] alongY = weights(fine.ny(), fine.spacingYMm(), from.ny(), from.spacingYMm());
        Weights[] alongZ = weights(fine.nz(), fine.spacingZMm(), from.nz(), from.spacingZMm());
        for (int x = 0; x < fine.nx(); x++) {
            for (int y = 0; y < fine.ny(); y++) {
                double[] row = row(coarse, alongX[x], alongY[y]);
                for (int z = 0; z < fine.nz(); z++) {
                    double value = 0;
                    for (int k = 0; k < 4; k++) {
                        value += alongZ[z].of(k) * row[alongZ[z].first + k];
                    }
                    image.values()[fine.index(x, y, z)] = (float) Math.max(0, scale * value);
                }
            }
        }
        return image;
    }

    /** The four coarse rows round a fine one, added up. */
    private static double[] row(Image coarse, Weights x, Weights y) {
        double[] row = new double[coarse.grid().nz()];
        for (int i = 0; i < 4; i++) {
            for (int j = 0; j < 4; j++) {
                double weight = x.of(i) * y.of(j);
                int at = coarse.grid().index(x.first + i, y.first + j, 0);
                for (int z = 0; z < row.length; z++) {
                    row[z] += weight * coarse.values()[at + z];
                }
            }
        }
        return row;
    }

    /** Four neighbours and their weights: of the second of them, the point is this fraction of a voxel away. */
    private record Weights(int first, double fraction) {
        double of(int k) {
            double t = fraction;
            return switch (k) {
                case 0 -> 0.5 * t * (-1 + t * (2 - t));
                case 1 -> 1 + 0.5 * t * t * (-5 + 3 * t);
                case 2 -> 0.5 * t * (1 + t * (4 - 3 * t));
                default -> 0.5 * t * t * (t - 1);
            };
        }
    }

    private static Weights[] weights(int fine, double fineMm, int coarse, double coarseMm) {
        Weights[] weights = new Weights[fine];
        for (int i = 0; i < fine; i++) {
            double place = (i - 0.5 * (fine - 1)) * fineMm / coarseMm + 0.5 * (coarse - 1);
            int below = Math.max(1, Math.min(coarse - 3, (int) Math.floor(place)));
            weights[i] = new Weights(below - 1, place - below);
        }
        return weights;
    }
}
