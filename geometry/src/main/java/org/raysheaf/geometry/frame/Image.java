package org.raysheaf.geometry.frame;

import java.util.Arrays;

/**
 * Values on the voxels of a grid, in the grid's memory order. The array is shared, never copied: whoever holds the image may change
 * its values. Not safe for writing from several threads to the same voxel.
 */
public final class Image {
    private final Grid grid;
    private final float[] values;

    /**
     * An image over an existing array.
     *
     * @param grid the grid
     * @param values one value per voxel, in the grid's order; shared, not copied
     * @throws IllegalArgumentException if the array's length is not the number of voxels
     */
    public Image(Grid grid, float[] values) {
        if (values.length != grid.voxels()) {
            throw new IllegalArgumentException(
                    "an image needs one value per voxel: expected " + grid.voxels() + ", found " + values.length);
        }
        this.grid = grid;
        this.values = values;
    }

    /**
     * An image of zeros.
     *
     * @param grid the grid
     */
    public Image(Grid grid) {
        this(grid, new float[grid.voxels()]);
    }

    /**
     * An image with the same value everywhere.
     *
     * @param grid the grid
     * @param value the value
     * @return a new image
     */
    public static Image filled(Grid grid, float value) {
        Image image = new Image(grid);
        Arrays.fill(image.values, value);
        return image;
    }

    /**
     * The grid.
     *
     * @return where the voxels are
     */
    public Grid grid() {
        return grid;
    }

    /**
     * The values themselves.
     *
     * @return the shared array, in the grid's order
     */
    public float[] values() {
        return values;
    }

    /**
     * One value.
     *
     * @param x index along the first axis
     * @param y index along the second axis
     * @param z index along the third axis
     * @return the value of that voxel
     */
    public float at(int x, int y, int z) {
        return values[grid.index(x, y, z)];
    }

    /**
     * A copy that shares nothing.
     *
     * @return a new image with the same values
     */
    public Image copy() {
        return new Image(grid, values.clone());
    }

    /**
     * Sum over all voxels, in double precision, in memory order.
     *
     * @return the sum of the values
     */
    public double sum() {
        double sum = 0;
        for (float value : values) {
            sum += value;
        }
        return sum;
    }
}
