package org.raysheaf.io.picture;

/**
 * A lattice of cells that fills a panel, row by row from the upper left.
 *
 * @param columns cells to the right
 * @param rows cells down
 * @param pitchRightMm width of a cell (mm)
 * @param pitchUpMm height of a cell (mm)
 */
record Raster(int columns, int rows, double pitchRightMm, double pitchUpMm) {
    /** The values on a lattice of other size that fills the same panel, interpolated linearly; NaN where the nearest cell has none. */
    float[] enlarged(float[] values, int toColumns, int toRows) {
        float[] large = new float[toColumns * toRows];
        for (int row = 0; row < toRows; row++) {
            double y = (row + 0.5) * rows / toRows - 0.5;
            for (int column = 0; column < toColumns; column++) {
                double x = (column + 0.5) * columns / toColumns - 0.5;
                large[row * toColumns + column] = at(values, x, y);
            }
        }
        return large;
    }

    private float at(float[] values, double x, double y) {
        float nearest = values[inside(Math.rint(y), rows) * columns + inside(Math.rint(x), columns)];
        double sum = 0;
        double weights = 0;
        for (int corner = 0; corner < 4; corner++) {
            double cx = Math.floor(x) + (corner & 1);
            double cy = Math.floor(y) + (corner >> 1);
            float value = values[inside(cy, rows) * columns + inside(cx, columns)];
            double weight = (1 - Math.abs(x - cx)) * (1 - Math.abs(y - cy));
            if (!Float.isNaN(value) && weight > 0) {
                sum += weight * value;
                weights += weight;
            }
        }
        return Float.isNaN(nearest) ? nearest : (float) (sum / weights);
    }

    private static int inside(double index, int count) {
        return (int) Math.max(0, Math.min(count - 1, index));
    }
}
