package org.raysheaf.io.picture;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;

/**
 * Samples an image at the pixels of a panel, by linear interpolation between voxel centres; in the outermost half voxel the value of the
 * edge goes on. Outside the grid there is no value: NaN.
 */
final class PlaneSampler {
    /** Rounding that must not lose the outermost pixel. */
    private static final double EDGE = 0.5 + 1e-9;

    /** Cosine above which a grid's axis counts as parallel to one of the world's. */
    private static final double PARALLEL = 0.9999;

    private final Image image;
    private final Grid grid;

    PlaneSampler(Image image) {
        this.image = image;
        this.grid = image.grid();
    }

    /** Values on the plane through a point, row by row from the upper left. */
    float[] plane(Panel panel, Vector3 point) {
        double pixel = 1 / panel.pixelsPerMm();
        Raster raster = new Raster(panel.width(), panel.height(), pixel, pixel);
        return sample(panel, raster, point, Vector3.ZERO, 1);
    }

    /**
     * The largest value along each line of sight through the whole grid. The lines run through voxel centres and what lies between them is
     * interpolated afterwards: the largest of many interpolated values would draw the lattice into the noise.
     */
    float[] maximum(Panel panel) {
        View view = panel.view();
        Vector3 size = panel.extent().size();
        Raster coarse = new Raster(
                steps(size, view.right()),
                steps(size, view.up()),
                size.dot(view.right()) / steps(size, view.right()),
                size.dot(view.up()) / steps(size, view.up()));
        int steps = steps(size, view.through());
        Vector3 step = view.through().times(size.dot(view.through()) / steps);
        Vector3 start = panel.extent().low().plus(step.times(0.5));
        return coarse.enlarged(sample(panel, coarse, start, step, steps), panel.width(), panel.height());
    }

    /** Voxels along one of the world's axes; on a turned grid, steps of the smallest spacing. */
    private int steps(Vector3 size, Vector3 axis) {
        double spacing = Math.min(grid.spacingXMm(), Math.min(grid.spacingYMm(), grid.spacingZMm()));
        if (Math.abs(grid.pose().u().dot(axis)) > PARALLEL) {
            spacing = grid.spacingXMm();
        } else if (Math.abs(grid.pose().v().dot(axis)) > PARALLEL) {
            spacing = grid.spacingYMm();
        } else if (Math.abs(grid.pose().w().dot(axis)) > PARALLEL) {
            spacing = grid.spacingZMm();
        }
        return (int) Math.max(1, Math.round(size.dot(axis) / spacing));
    }

    private float[] sample(Panel panel, Raster raster, Vector3 start, Vector3 step, int steps) {
        View view = panel.view();
        Vector3 right = view.right().times(raster.pitchRightMm());
        Vector3 down = view.up().times(-raster.pitchUpMm());
        // The centre of the upper left cell, at the depth of the start.
        Vector3 first = view.right()
                .times(panel.extent().low().dot(view.right()))
                .plus(view.up().times(panel.extent().high().dot(view.up())))
                .plus(view.through().times(start.dot(view.through())))
                .plus(right.plus(down).times(0.5));
        Vector3 origin = grid.indices(first);
        Vector3 perColumn = grid.indices(first.plus(right)).minus(origin);
        Vector3 perRow = grid.indices(first.plus(down)).minus(origin);
        Vector3 perStep = grid.indices(first.plus(step)).minus(origin);
        float[] values = new float[raster.columns() * raster.rows()];
        for (int row = 0; row < raster.rows(); row++) {
            for (int column = 0; column < raster.columns(); column++) {
                Vector3 at = origin.plus(perRow.times(row)).plus(perColumn.times(column));
                values[row * raster.columns() + column] = largest(at, perStep, steps);
            }
        }
        return values;
    }

    private float largest(Vector3 at, Vector3 perStep, int steps) {
        float largest = Float.NaN;
        for (int i = 0; i < steps; i++) {
            float value = value(at.x() + i * perStep.x(), at.y() + i * perStep.y(), at.z() + i * perStep.z());
            if (!(largest >= value)) {
                largest = Float.isNaN(value) ? largest : value;
            }
        }
        return largest;
    }

    private float value(double x, double y, double z) {
        int nx = grid.nx();
        int ny = grid.ny();
        int nz = grid.nz();
        if (!(x >= -EDGE
                && y >= -EDGE
                && z >= -EDGE
                && x <= nx - 1 + EDGE
                && y <= ny - 1 + EDGE
                && z <= nz - 1 + EDGE)) {
            return Float.NaN;
        }
        double cx = Math.max(0, Math.min(nx - 1, x));
        double cy = Math.max(0, Math.min(ny - 1, y));
        double cz = Math.max(0, Math.min(nz - 1, z));
        int x0 = Math.min((int) cx, Math.max(0, nx - 2));
        int y0 = Math.min((int) cy, Math.max(0, ny - 2));
        int z0 = Math.min((int) cz, Math.max(0, nz - 2));
        double fx = cx - x0;
        double fy = cy - y0;
        double fz = cz - z0;
        int x1 = Math.min(x0 + 1, nx - 1);
        double near = (1 - fy) * line(x0, y0, z0, fz) + (fy > 0 ? fy * line(x0, y0 + 1, z0, fz) : 0);
        if (!(fx > 0)) {
            return (float) near;
        }
        double far = (1 - fy) * line(x1, y0, z0, fz) + (fy > 0 ? fy * line(x1, y0 + 1, z0, fz) : 0);
        return (float) ((1 - fx) * near + fx * far);
    }

    private double line(int x, int y, int z, double fraction) {
        double near = image.at(x, y, z);
        return fraction > 0 ? near + fraction * (image.at(x, y, z + 1) - near) : near;
    }
}
