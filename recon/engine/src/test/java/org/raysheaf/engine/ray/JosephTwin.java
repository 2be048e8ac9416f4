package org.raysheaf.engine.ray;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Vector3;

/**
 * The definition of the projector, slow and obvious: double precision, straight from the two end points, every plane of the grid
 * tried, every corner tested. What {@link Joseph} does must agree with this.
 */
public final class JosephTwin {
    private JosephTwin() {}

    /** The weighted length of a ray in every voxel, in the grid's order. */
    public static double[] row(Grid grid, Vector3 start, Vector3 end) {
        double[] row = new double[grid.voxels()];
        double[] o = array(grid.indices(start));
        double[] e = array(grid.indices(end));
        int[] n = {grid.nx(), grid.ny(), grid.nz()};
        int w = 0;
        for (int axis = 1; axis < 3; axis++) {
            if (Math.abs(e[axis] - o[axis]) > Math.abs(e[w] - o[w])) {
                w = axis;
            }
        }
        double planesCrossed = Math.abs(e[w] - o[w]);
        if (!(planesCrossed > 0)) {
            return row;
        }
        double step = end.minus(start).norm() / planesCrossed;
        int a = w == 0 ? 1 : 0;
        int b = w == 2 ? 1 : 2;
        for (int plane = 0; plane < n[w]; plane++) {
            double t = (plane - o[w]) / (e[w] - o[w]);
            if (t < 0 || t > 1) {
                continue;
            }
            double u = o[a] + t * (e[a] - o[a]);
            double v = o[b] + t * (e[b] - o[b]);
            for (int iu = (int) Math.floor(u); iu <= Math.floor(u) + 1; iu++) {
                for (int iv = (int) Math.floor(v); iv <= Math.floor(v) + 1; iv++) {
                    if (iu >= 0 && iu < n[a] && iv >= 0 && iv < n[b]) {
                        int[] at = new int[3];
                        at[w] = plane;
                        at[a] = iu;
                        at[b] = iv;
                        row[grid.index(at[0], at[1], at[2])] += step * (1 - Math.abs(u - iu)) * (1 - Math.abs(v - iv));
                    }
                }
            }
        }
        return row;
    }

    /**
     * The same with a normal density along the ray: each plane's part times the density of its distance from the centre, the variance
     * that of the event plus a sixth of a plane's squared, cut off at three standard deviations and made whole again.
     */
    public static double[] row(Grid grid, Vector3 start, Vector3 end, double centreMm, double sdMm) {
        double[] row = row(grid, start, end);
        double[] o = array(grid.indices(start));
        double[] e = array(grid.indices(end));
        int w = 0;
        for (int axis = 1; axis < 3; axis++) {
            if (Math.abs(e[axis] - o[axis]) > Math.abs(e[w] - o[w])) {
                w = axis;
            }
        }
        double step = end.minus(start).norm() / Math.abs(e[w] - o[w]);
        double variance = sdMm * sdMm + step * step / 6;
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    int plane = new int[] {x, y, z}[w];
                    double away =
                            (plane - o[w]) / (e[w] - o[w]) * end.minus(start).norm() - centreMm;
                    double density = away * away > 9 * variance
                            ? 0
                            : Math.exp(-away * away / (2 * variance))
                                    / Math.sqrt(2 * Math.PI * variance)
                                    / 0.9973002039;
                    row[grid.index(x, y, z)] *= density;
                }
            }
        }
        return row;
    }

    private static double[] array(Vector3 p) {
        return new double[] {p.x(), p.y(), p.z()};
    }
}
