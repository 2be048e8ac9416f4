package org.raysheaf.geometry.detector;

import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

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
    private final double[] corner;
    private final double perPitchU;
    private final double perPitchV;
    private final double perPitchW;

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
        attenuationLength = placed.material().meanFreePathMm();
        Pose pose = placed.pose();
        axes = new double[] {
            pose.u().x(), pose.u().y(), pose.u().z(),
            pose.v().x(), pose.v().y(), pose.v().z(),
            pose.w().x(), pose.w().y(), pose.w().z()
        };
        Vector3 lowest = pose.apply(new Vector3(-0.5 * width, -0.5 * height, 0));
        corner = new double[] {lowest.x(), lowest.y(), lowest.z()};
        perPitchU = 1 / pitchU;
        perPitchV = 1 / pitchV;
        perPitchW = 1 / pitchW;
    }

    /** A direction as this block's frame sees it, with what tracing needs of it: three components, then their inverses. */
    void localDirection(double dx, double dy, double dz, double[] local) {
        for (int axis = 0; axis < 3; axis++) {
            local[axis] = notZero(axes[3 * axis] * dx + axes[3 * axis + 1] * dy + axes[3 * axis + 2] * dz);
            local[3 + axis] = 1 / local[axis];
        }
    }

    private static double notZero(double d) {
        return Math.abs(d) < NEARLY_ZERO ? NEARLY_ZERO : d;
    }

    /** One coordinate of a point, from the corner of the box, so that cell i of an axis begins at i · pitch. */
    private double fromCorner(int axis, double x, double y, double z) {
        return axes[3 * axis] * (x - corner[0])
                + axes[3 * axis + 1] * (y - corner[1])
                + axes[3 * axis + 2] * (z - corner[2]);
    }

    /** Where a ray enters the block's box (mm, at least 0), or NaN if it misses. */
    double enter(double ox, double oy, double oz, double[] d) {
        double pu = fromCorner(0, ox, oy, oz);
        double pv = fromCorner(1, ox, oy, oz);
        double pw = fromCorner(2, ox, oy, oz);
        double in = Math.max(low(pu, d[3], width), Math.max(low(pv, d[4], height), low(pw, d[5], depth)));
        double out = Math.min(high(pu, d[3], width), Math.min(high(pv, d[4], height), high(pw, d[5], depth)));
        in = Math.max(in, 0);
        return in < out ? in : Double.NaN;
    }

    private static double low(double p, double inverse, double size) {
        return (inverse > 0 ? -p : size - p) * inverse;
    }

    private static double high(double p, double inverse, double size) {
        return (inverse > 0 ? size - p : -p) * inverse;
    }

    /** Appends the crystals that a ray crosses, nearest first, from where it enters the block's box up to a length. */
    void trace(double ox, double oy, double oz, double[] d, double in, double length, RayPath path) {
        double pu = fromCorner(0, ox, oy, oz);
        double pv = fromCorner(1, ox, oy, oz);
        double pw = fromCorner(2, ox, oy, oz);
        double iu = d[3];
        double iv = d[4];
        double iw = d[5];
        int stepU = iu > 0 ? 1 : -1;
        int stepV = iv > 0 ? 1 : -1;
        int stepW = iw > 0 ? 1 : -1;
        int column = cell((pu + in * d[0]) * perPitchU, columns);
        int row = cell((pv + in * d[1]) * perPitchV, rows);
        int layer = cell((pw + in * d[2]) * perPitchW, layers);
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
            if (Math.min(endU, Math.min(endV, endW)) >= length) {
                return;
            }
            if (endU <= endV && endU <= endW) {
                column += stepU;
            } else if (endV <= endW) {
                row += stepV;
            } else {
                layer += stepW;
            }
        }
    }

    private static int cell(double position, int count) {
        return Math.max(0, Math.min(count - 1, (int) position));
    }
}
