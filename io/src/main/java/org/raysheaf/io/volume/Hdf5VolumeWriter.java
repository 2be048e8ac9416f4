package org.raysheaf.io.volume;

import io.jhdf.HdfFile;
import io.jhdf.WritableHdfFile;
import io.jhdf.api.WritableDataset;
import java.io.IOException;
import java.nio.file.Path;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;

/** Writes volumes as HDF5; {@link VolumeFile} has the layout. */
final class Hdf5VolumeWriter {
    /** The library that writes holds the whole file in one buffer of less than 2 GiB. */
    private static final int MOST_VOXELS = 500_000_000;

    private final Path named;

    /**
     * Makes the writer.
     *
     * @param named the file that messages speak of
     */
    Hdf5VolumeWriter(Path named) {
        this.named = named;
    }

    void write(Image image, String unit, Path file) throws IOException {
        Grid grid = image.grid();
        if (grid.voxels() > MOST_VOXELS) {
            throw new VolumeException(
                    named,
                    "expected at most " + MOST_VOXELS + " voxels, found " + grid.voxels() + "; write .nii.gz instead");
        }
        try (WritableHdfFile out = HdfFile.write(file)) {
            out.putAttribute(Hdf5VolumeReader.FORMAT, "volume/" + Hdf5VolumeReader.VERSION);
            WritableDataset values = out.putDataset(Hdf5VolumeReader.VALUES, inFileOrder(image));
            values.putAttribute(Hdf5VolumeReader.UNIT, unit);
            values.putAttribute(
                    Hdf5VolumeReader.SPACING, new double[] {grid.spacingXMm(), grid.spacingYMm(), grid.spacingZMm()});
            double[][] rows = VoxelAffine.of(grid).rows();
            values.putAttribute(Hdf5VolumeReader.AFFINE, new double[][] {rows[0], rows[1], rows[2], {0, 0, 0, 1}});
        }
    }

    private static float[][][] inFileOrder(Image image) {
        Grid grid = image.grid();
        float[][][] values = new float[grid.nz()][grid.ny()][grid.nx()];
        for (int z = 0; z < grid.nz(); z++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int x = 0; x < grid.nx(); x++) {
                    values[z][y][x] = image.at(x, y, z);
                }
            }
        }
        return values;
    }
}
