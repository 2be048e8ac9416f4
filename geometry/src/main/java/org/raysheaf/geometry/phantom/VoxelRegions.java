package org.raysheaf.geometry.phantom;

import java.util.Arrays;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Problems;
import org.raysheaf.geometry.solid.Bounds;

/** Which label fills each voxel, looked up fast. Immutable. */
final class VoxelRegions {
    private final Grid grid;
    private final short[] labelOf;
    private final double[] toIndex;
    private final double[] origin;

    /**
     * Reads a volume of labels.
     *
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if a voxel is no whole number
     */
    VoxelRegions(LabelledVolume description, Image volume) {
        grid = volume.grid();
        labelOf = new short[grid.voxels()];
        int[] table = new int[65_536];
        Arrays.fill(table, -1);
        for (int i = 0; i < description.labels().size(); i++) {
            table[description.labels().get(i).label()] = i;
        }
        for (int j = 0; j < labelOf.length; j++) {
            float value = volume.values()[j];
            if (!(value >= 0 && value < table.length && value == Math.rint(value))) {
                new Problems("phantom")
                        .rule(
                                false,
                                "volume.file",
                                "expected whole numbers from 0 to 65535 as labels in " + description.file() + ", found "
                                        + value + " in voxel " + j)
                        .orThrow();
            }
            labelOf[j] = (short) table[(int) value];
        }
        Pose pose = grid.pose();
        toIndex = new double[] {
            pose.u().x() / grid.spacingXMm(), pose.u().y() / grid.spacingXMm(),
                    pose.u().z() / grid.spacingXMm(),
            pose.v().x() / grid.spacingYMm(), pose.v().y() / grid.spacingYMm(),
                    pose.v().z() / grid.spacingYMm(),
            pose.w().x() / grid.spacingZMm(), pose.w().y() / grid.spacingZMm(),
                    pose.w().z() / grid.spacingZMm()
        };
        Vector3 corner = grid.centre(-0.5, -0.5, -0.5);
        origin = new double[] {corner.x(), corner.y(), corner.z()};
    }

    /** Index in the table of labels of what fills a point, or −1. */
    int labelAt(double x, double y, double z) {
        double px = x - origin[0];
        double py = y - origin[1];
        double pz = z - origin[2];
        double i = toIndex[0] * px + toIndex[1] * py + toIndex[2] * pz;
        double j = toIndex[3] * px + toIndex[4] * py + toIndex[5] * pz;
        double k = toIndex[6] * px + toIndex[7] * py + toIndex[8] * pz;
        boolean inside = i >= 0 && j >= 0 && k >= 0 && i < grid.nx() && j < grid.ny() && k < grid.nz();
        return inside ? labelOf[grid.index((int) i, (int) j, (int) k)] : -1;
    }

    /** Index in the table of labels of what fills a voxel, or −1. */
    int labelOf(int voxel) {
        return labelOf[voxel];
    }

    Grid grid() {
        return grid;
    }

    Bounds bounds() {
        Vector3 a = grid.centre(-0.5, -0.5, -0.5);
        Bounds bounds = new Bounds(a, a);
        for (int corner = 1; corner < 8; corner++) {
            Vector3 c = grid.centre(
                    (corner & 1) == 0 ? -0.5 : grid.nx() - 0.5,
                    (corner & 2) == 0 ? -0.5 : grid.ny() - 0.5,
                    (corner & 4) == 0 ? -0.5 : grid.nz() - 0.5);
            bounds = bounds.with(new Bounds(c, c));
        }
        return bounds;
    }
}
