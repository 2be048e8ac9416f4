package org.raysheaf.engine.correct;

import java.util.ArrayList;
import java.util.List;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.PlacedBlock;

/**
 * The elements for which scatter is worked out, some of each block, and for every element the four of them between which it lies, with their
 * bilinear weights. Immutable, safe for use by several threads.
 */
final class ScatterMesh {
    /** Elements across a block that are sampled, each way. */
    private static final int NODES = 3;

    private static final int CORNERS = 4;

    private final int[] sampled;
    /** Positions among the sampled elements of the corners of element e, from e · {@value #CORNERS}. */
    private final int[] corners;

    private final float[] weights;

    ScatterMesh(DetectorSystem system) {
        corners = new int[CORNERS * system.elements()];
        weights = new float[CORNERS * system.elements()];
        List<Integer> nodes = new ArrayList<>();
        for (PlacedBlock block : system.blocks()) {
            CrystalBlock lattice = block.kind().lattice();
            int[] columns = spread(lattice.columns());
            int[] rows = spread(lattice.rows());
            for (int crystal = 0; crystal < lattice.elements(); crystal++) {
                surround(
                        block.firstElement() + crystal,
                        nodes.size(),
                        columns,
                        rows,
                        lattice.column(crystal),
                        lattice.row(crystal));
            }
            for (int row : rows) {
                for (int column : columns) {
                    nodes.add(block.firstElement() + lattice.crystal(column, row, lattice.layers() / 2));
                }
            }
        }
        sampled = nodes.stream().mapToInt(Integer::intValue).toArray();
    }

    /** Some of so many places, the first and the last among them. */
    private static int[] spread(int count) {
        int n = Math.min(NODES, count);
        return IntStream.range(0, n)
                .map(i -> n == 1 ? (count - 1) / 2 : (int) Math.rint((double) i * (count - 1) / (n - 1)))
                .toArray();
    }

    private void surround(int element, int firstNode, int[] columns, int[] rows, int column, int row) {
        int c = below(columns, column);
        int r = below(rows, row);
        double fc = share(columns, c, column);
        double fr = share(rows, r, row);
        for (int corner = 0; corner < CORNERS; corner++) {
            int right = corner & 1;
            int up = corner >> 1;
            int nodeColumn = Math.min(c + right, columns.length - 1);
            int nodeRow = Math.min(r + up, rows.length - 1);
            corners[CORNERS * element + corner] = firstNode + nodeRow * columns.length + nodeColumn;
            weights[CORNERS * element + corner] = (float) ((right == 1 ? fc : 1 - fc) * (up == 1 ? fr : 1 - fr));
        }
    }

    private static int below(int[] nodes, int place) {
        int i = 0;
        while (i + 2 < nodes.length && place >= nodes[i + 1]) {
            i++;
        }
        return i;
    }

    private static double share(int[] nodes, int i, int place) {
        return i + 1 < nodes.length ? (place - nodes[i]) / (double) (nodes[i + 1] - nodes[i]) : 0;
    }

    /** The sampled elements, shared. */
    int[] sampled() {
        return sampled;
    }

    /** A value for a pair of elements out of a square table over the sampled ones. */
    double interpolate(float[] table, int a, int b) {
        double sum = 0;
        for (int i = CORNERS * a; i < CORNERS * (a + 1); i++) {
            int row = corners[i] * sampled.length;
            double along = 0;
            for (int j = CORNERS * b; j < CORNERS * (b + 1); j++) {
                along += weights[j] * table[row + corners[j]];
            }
            sum += weights[i] * along;
        }
        return sum;
    }

    /**
     * A value between two neighbouring places of rows, for a pair of elements out of a square table of rows over the sampled ones.
     *
     * @param table rows, null where all is 0
     * @param low the lower place
     * @param share how far the place wanted is from it to the next, 0 to 1
     */
    double interpolate(float[] @Nullable [] table, int low, double share, int a, int b) {
        double sum = 0;
        for (int i = CORNERS * a; i < CORNERS * (a + 1); i++) {
            for (int j = CORNERS * b; j < CORNERS * (b + 1); j++) {
                float[] row = table[corners[i] * sampled.length + corners[j]];
                if (row != null) {
                    sum += weights[i] * weights[j] * ((1 - share) * row[low] + share * row[low + 1]);
                }
            }
        }
        return sum;
    }
}
