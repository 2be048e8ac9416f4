package org.raysheaf.engine.ray;

import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Problems;

/**
 * A grid with a border of one voxel on every side, as the projector sees it. Values on a lattice are a {@code float[]} of {@link
 * #size()} entries. In an image the border holds zeros, so a sample within one voxel of the edge counts with its inside share and
 * needs no test; in an accumulator the border collects what fell outside and is ignored. This is the only place that knows about the
 * border. Immutable.
 */
public final class Lattice {
    /** More planes than a walk can number. */
    private static final int MOST_PLANES = 1 << 15;

    private final Grid grid;
    private final int[] planes;
    private final int[] strides;
    private final double[] spacingMm;
    /** Row r of the map from world to lattice coordinates: three factors and a shift, at 4 r. */
    private final double[] fromWorld = new double[12];

    /**
     * The lattice of a grid.
     *
     * @param grid the grid, at most 32,765 voxels along each axis
     * @throws org.raysheaf.geometry.settings.InvalidSettingsException if the grid is too large for the projector
     */
    public Lattice(Grid grid) {
        this.grid = grid;
        planes = new int[] {grid.nx() + 2, grid.ny() + 2, grid.nz() + 2};
        strides = new int[] {planes[1] * planes[2], planes[2], 1};
        spacingMm = new double[] {grid.spacingXMm(), grid.spacingYMm(), grid.spacingZMm()};
        boolean fits = (double) planes[0] * planes[1] * planes[2] < Integer.MAX_VALUE - 8;
        if (!fits || Math.max(planes[0], Math.max(planes[1], planes[2])) > MOST_PLANES) {
            new Problems("grid")
                    .rule(
                            false,
                            "voxel_mm",
                            "the projector takes at most 32765 voxels along an axis and 2^31 in all, border included:"
                                    + " found " + grid.nx() + " x " + grid.ny() + " x " + grid.nz()
                                    + "; take larger voxels")
                    .orThrow();
        }
        Vector3 zero = grid.indices(Vector3.ZERO);
        setColumn(3, zero.plus(new Vector3(1, 1, 1)));
        setColumn(0, grid.indices(Vector3.X).minus(zero));
        setColumn(1, grid.indices(Vector3.Y).minus(zero));
        setColumn(2, grid.indices(Vector3.Z).minus(zero));
    }

    private void setColumn(int column, Vector3 value) {
        fromWorld[column] = value.x();
        fromWorld[4 + column] = value.y();
        fromWorld[8 + column] = value.z();
    }

    /**
     * The grid within the border.
     *
     * @return the grid
     */
    public Grid grid() {
        return grid;
    }

    /**
     * Number of voxels, border included.
     *
     * @return the length of every array of values on this lattice
     */
    public int size() {
        return planes[0] * strides[0];
    }

    /**
     * Voxel planes across an axis, border included.
     *
     * @param axis 0, 1 or 2
     * @return the grid's voxels along that axis, plus 2
     */
    public int planes(int axis) {
        return planes[axis];
    }

    /**
     * Distance in memory between neighbours along an axis.
     *
     * @param axis 0, 1 or 2
     * @return the difference of their indices
     */
    public int stride(int axis) {
        return strides[axis];
    }

    /**
     * Distance in space between neighbours along an axis.
     *
     * @param axis 0, 1 or 2
     * @return the spacing (mm)
     */
    double spacingMm(int axis) {
        return spacingMm[axis];
    }

    /**
     * One lattice coordinate of a point.
     *
     * @param axis 0, 1 or 2
     * @param x the point (mm)
     * @param y the point (mm)
     * @param z the point (mm)
     * @return the coordinate; the centre of the grid's first voxel is at 1
     */
    double coordinate(int axis, double x, double y, double z) {
        int row = 4 * axis;
        return fromWorld[row] * x + fromWorld[row + 1] * y + fromWorld[row + 2] * z + fromWorld[row + 3];
    }

    /**
     * Copies an image onto the lattice.
     *
     * @param image values on this lattice's grid
     * @return a new array with a border of zeros
     * @throws IllegalArgumentException if the image has another shape
     */
    public float[] fromImage(Image image) {
        float[] values = new float[size()];
        copyRows(requireShape(image).values(), values, true);
        return values;
    }

    /**
     * Copies the inside of a lattice to an image.
     *
     * @param values values on this lattice
     * @return a new image, without the border
     */
    public Image toImage(float[] values) {
        Image image = new Image(grid);
        copyRows(image.values(), values, false);
        return image;
    }

    private void copyRows(float[] inside, float[] bordered, boolean inwards) {
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                int at = grid.index(x, y, 0);
                int to = (x + 1) * strides[0] + (y + 1) * strides[1] + 1;
                if (inwards) {
                    System.arraycopy(inside, at, bordered, to, grid.nz());
                } else {
                    System.arraycopy(bordered, to, inside, at, grid.nz());
                }
            }
        }
    }

    private Image requireShape(Image image) {
        Grid other = image.grid();
        if (other.nx() != grid.nx() || other.ny() != grid.ny() || other.nz() != grid.nz()) {
            throw new IllegalArgumentException("expected an image of " + grid.nx() + " x " + grid.ny() + " x "
                    + grid.nz() + " voxels, found " + other.nx() + " x " + other.ny() + " x " + other.nz());
        }
        return image;
    }
}
