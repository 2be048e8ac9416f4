package org.raysheaf.engine.ray;

import java.util.Arrays;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Vector3;

/**
 * The exact length of a segment in every voxel: the segment is cut at every plane between voxels that it crosses, and each piece
 * belongs to the voxel of its middle (Siddon, Medical Physics 12 (1985) 252, without its shortcuts).
 */
final class ExactTracer {
    private ExactTracer() {}

    static double[] row(Grid grid, Vector3 start, Vector3 end) {
        double[] row = new double[grid.voxels()];
        Vector3 o = grid.indices(start);
        Vector3 d = grid.indices(end).minus(o);
        double[] cuts = new double[grid.nx() + grid.ny() + grid.nz() + 5];
        int size = addCuts(cuts, 0, grid.nx(), o.x(), d.x());
        size = addCuts(cuts, size, grid.ny(), o.y(), d.y());
        size = addCuts(cuts, size, grid.nz(), o.z(), d.z());
        cuts[size++] = 0;
        cuts[size++] = 1;
        Arrays.sort(cuts, 0, size);
        double length = end.minus(start).norm();
        for (int i = 1; i < size; i++) {
            double middle = 0.5 * (cuts[i - 1] + cuts[i]);
            int x = (int) Math.floor(o.x() + middle * d.x() + 0.5);
            int y = (int) Math.floor(o.y() + middle * d.y() + 0.5);
            int z = (int) Math.floor(o.z() + middle * d.z() + 0.5);
            boolean inside = x >= 0 && x < grid.nx() && y >= 0 && y < grid.ny() && z >= 0 && z < grid.nz();
            if (inside && middle > 0 && middle < 1) {
                row[grid.index(x, y, z)] += (cuts[i] - cuts[i - 1]) * length;
            }
        }
        return row;
    }

    private static int addCuts(double[] cuts, int size, int n, double o, double d) {
        int at = size;
        for (int plane = 0; d != 0 && plane <= n; plane++) {
            cuts[at++] = (plane - 0.5 - o) / d;
        }
        return at;
    }
}
