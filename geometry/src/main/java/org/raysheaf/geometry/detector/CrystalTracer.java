package org.raysheaf.geometry.detector;

import org.raysheaf.geometry.frame.Pose;

/**
 * Follows rays through one placed block of crystals. The block is a lattice of cells, each holding a crystal and the gap behind it, so a ray
 * is walked from cell to cell and clipped against the crystal of each. Immutable, safe for use by several threads.
 */
final class CrystalTracer {
    /** Stands for a direction component of 0: the ray then takes longer than any detector is large to leave its cell. */
    private static final double NEARLY_ZERO = 1e-12;

    private final int columns;
    private final int rows;
    private final int layers;
    private final double pitchU;
    private final double pitchV;
    private final double pitchW;
    private final double sizeU;
    private final double sizeV;
    private final double sizeW;
    private final double width;
    private final double height;
    private final double depth;
    private final int firstElement;
    private final double attenuationLength;
    private final double[] axes;
    private final double[] origin;

    CrystalTracer(PlacedBlock placed, CrystalBlock kind) {
        columns = kind.columns();
        rows = kind.rows();
        layers = kind.layers();
        pitchU = columns > 1 ? kind.pitchMm().x() : kind.crystalMm().x();
        pitchV = rows > 1 ? kind.pitchMm().y() : kind.crystalMm().y();
        pitchW = layers > 1 ? kind.pitchMm().z() : kind.crystalMm().z();
        sizeU = kind.crystalMm().x();
        sizeV = kind.crystalMm().y();
        sizeW = kind.crystalMm().z();
        width = kind.widthMm();
        height = kind.heightMm();
        depth = kind.depthMm();
        firstElement = placed.firstElement();
        attenuationLength = placed.material().attenuationLengthMm();
        Pose pose = placed.pose();
        axes = new double[] {
            pose.u().x(), pose.u().y(), pose.u().z(),
            pose.v().x(), pose.v().y(), pose.v().z(),
            pose.w().x(), pose.w().y(), pose.w().z()
        };
        origin = new double[] {
            pose.origin().x(), pose.origin().y(), pose.origin().z(),
        };
    }

    private double along(int axis, double x, double y, double z) {
        return axes[3 * axis] * x + axes[3 * axis + 1] * y + axes[3 * axis + 2] * z;
    }

    private static double notZero(double d) {
        return Math.abs(d) < NEARLY_ZERO ? NEARLY_ZERO : d;
    }

    /** Where a ray enters the block's box (mm, at least 0), or NaN if it misses. */
    double enter(double ox, double oy, double oz, double dx, double dy, double dz) {
        double x = ox - origin[0];
        double y = oy - origin[1];
        double z = oz - origin[2];
        double pu = along(0, x, y, z) + 0.5 * width;
        double pv = along(1, x, y, z) + 0.5 * height;
        double pw = along(2, x, y, z);
        double iu = 1 / notZero(along(0, dx, dy, dz));
        double iv = 1 / notZero(along(1, dx, dy, dz));
        double iw = 1 / notZero(along(2, dx, dy, dz));
        double in = Math.max(low(pu, iu, width), Math.max(low(pv, iv, height), low(pw, iw, depth)));
        double out = Math.min(high(pu, iu, width), Math.min(high(pv, iv, height), high(pw, iw, depth)));
        in = Math.max(in, 0);
        return in < out ? in : Double.NaN;
    }

    private static double low(double p, double inverse, double size) {
        return (inverse > 0 ? -p : size - p) * inverse;
    }

    private static double high(double p, double inverse, double size) {
        return (inverse > 0 ? size - p : -p) * inverse;
    }

    /** Appends the crystals that a ray crosses, nearest first, from where it enters the block's box. */
    void trace(double ox, double oy, double oz, double dx, double dy, double dz, double in, RayPath path) {
        double x = ox - origin[0];
        double y = oy - origin[1];
        double z = oz - origin[2];
        // Corner of the box as origin, so that cell i of an axis begins at i · pitch.
        double pu = along(0, x, y, z) + 0.5 * width;
        double pv = along(1, x, y, z) + 0.5 * height;
        double pw = along(2, x, y, z);
        double du = notZero(along(0, dx, dy, dz));
        double dv = notZero(along(1, dx, dy, dz));
        double dw = notZero(along(2, dx, dy, dz));
        double iu = 1 / du;
        double iv = 1 / dv;
        double iw = 1 / dw;
        int column = cell((pu + in * du) / pitchU, columns);
        int row = cell((pv + in * dv) / pitchV, rows);
        int layer = cell((pw + in * dw) / pitchW, layers);
        while (column >= 0 && column < columns && row >= 0 && row < rows && layer >= 0 && layer < layers) {
            double qu = pu - column * pitchU;
            double qv = pv - row * pitchV;
            double qw = pw - layer * pitchW;
            double from = Math.max(low(qu, iu, sizeU), Math.max(low(qv, iv, sizeV), low(qw, iw, sizeW)));
            double to = Math.min(high(qu, iu, sizeU), Math.min(high(qv, iv, sizeV), high(qw, iw, sizeW)));
            from = Math.max(from, 0);
            if (from < to) {
                int element = firstElement + (layer * rows + row) * columns + column;
                path.addSegment(element, from, to, attenuationLength);
            }
            double endU = high(qu, iu, pitchU);
            double endV = high(qv, iv, pitchV);
            double endW = high(qw, iw, pitchW);
            if (endU <= endV && endU <= endW) {
                column += du > 0 ? 1 : -1;
            } else if (endV <= endW) {
                row += dv > 0 ? 1 : -1;
            } else {
                layer += dw > 0 ? 1 : -1;
            }
        }
    }

    private static int cell(double position, int count) {
        return Math.max(0, Math.min(count - 1, (int) position));
    }
}
