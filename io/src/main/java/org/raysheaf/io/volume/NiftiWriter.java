package org.raysheaf.io.volume;

import java.io.BufferedOutputStream;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.zip.GZIPOutputStream;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;

/** Writes NIfTI-1 files as {@link NiftiHeader} describes them. */
final class NiftiWriter {
    private static final int BUFFER = 1 << 16;

    private final Path named;

    /**
     * Makes the writer.
     *
     * @param named the file that messages speak of
     */
    NiftiWriter(Path named) {
        this.named = named;
    }

    /** Writes one volume, or several on the same grid as a series. */
    void write(List<Image> images, String unit, Path file, boolean gzip) throws IOException {
        Grid grid = images.get(0).grid();
        int most = Math.max(images.size(), Math.max(grid.nx(), Math.max(grid.ny(), grid.nz())));
        if (most > NiftiHeader.MOST) {
            throw new VolumeException(
                    named,
                    "expected at most " + NiftiHeader.MOST + " voxels along an axis, found " + most
                            + "; write .h5 instead");
        }
        try (OutputStream out = open(file, gzip)) {
            out.write(NiftiHeader.of(grid, unit, images.size()).array());
            for (Image image : images) {
                values(image, out);
            }
        }
    }

    private static void values(Image image, OutputStream out) throws IOException {
        Grid grid = image.grid();
        ByteBuffer row = ByteBuffer.allocate(4 * grid.nx()).order(ByteOrder.LITTLE_ENDIAN);
        for (int z = 0; z < grid.nz(); z++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int x = 0; x < grid.nx(); x++) {
                    row.putFloat(4 * x, image.at(x, y, z));
                }
                out.write(row.array());
            }
        }
    }

    private static OutputStream open(Path file, boolean gzip) throws IOException {
        OutputStream plain = new BufferedOutputStream(Files.newOutputStream(file), BUFFER);
        return gzip ? new BufferedOutputStream(new GZIPOutputStream(plain, BUFFER), BUFFER) : plain;
    }
}
