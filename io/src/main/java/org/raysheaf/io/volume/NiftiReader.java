package org.raysheaf.io.volume;

import java.io.BufferedInputStream;
import java.io.EOFException;
import java.io.IOException;
import java.io.InputStream;
import java.nio.ByteBuffer;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.zip.GZIPInputStream;
import java.util.zip.ZipException;
import org.raysheaf.geometry.frame.Image;

/** Reads NIfTI-1 files, packed or not, of either byte order; {@link NiftiHeader} has the fields. */
final class NiftiReader {
    /** No deflate stream unpacks to more than 1032 times its size. */
    private static final long MOST_PACKED = 1032;

    /** Bytes behind the voxels that are worth reading. */
    private static final int LONGEST_TAIL = 1 << 20;

    private final Path file;

    NiftiReader(Path file) {
        this.file = file;
    }

    Volume read() throws IOException {
        boolean packed = isPacked();
        try (InputStream raw = new BufferedInputStream(Files.newInputStream(file), 1 << 16);
                InputStream in = packed ? new BufferedInputStream(new GZIPInputStream(raw, 1 << 16), 1 << 16) : raw) {
            byte[] head = in.readNBytes(NiftiHeader.SIZE);
            NiftiFields fields = new NiftiFields(file, head);
            VoxelOrder order = order(fields);
            requireSize(fields, packed);
            in.skipNBytes(fields.voxelsAt() - NiftiHeader.SIZE);
            Image image = voxels(in, fields, order);
            // A gzip stream is checked against its checksum when its end is read.
            in.readNBytes(LONGEST_TAIL);
            return new Volume(image, fields.unit());
        } catch (ZipException e) {
            throw new VolumeException(file, "expected a sound gzip stream, found it damaged: " + e.getMessage(), e);
        } catch (EOFException e) {
            throw new VolumeException(file, "expected more bytes, found the end; the file is cut short", e);
        }
    }

    private boolean isPacked() throws IOException {
        try (InputStream in = Files.newInputStream(file)) {
            return in.read() == 0x1f && in.read() == 0x8b;
        }
    }

    private VoxelOrder order(NiftiFields fields) throws VolumeException {
        try {
            return VoxelOrder.of(fields.counts(), fields.affine());
        } catch (IllegalArgumentException e) {
            throw new VolumeException(file, String.valueOf(e.getMessage()), e);
        }
    }

    private void requireSize(NiftiFields fields, boolean packed) throws IOException {
        long needed = fields.voxelsAt() + fields.voxels() * fields.type().bytes();
        long size = Files.size(file);
        if (packed ? needed / MOST_PACKED > size : needed > size) {
            throw new VolumeException(
                    file,
                    "expected " + needed + (packed ? " bytes once unpacked" : " bytes") + " as its header says, found "
                            + size + "; the file is cut short");
        }
    }

    private Image voxels(InputStream in, NiftiFields fields, VoxelOrder order) throws IOException {
        Image image = new Image(order.grid());
        float[] values = image.values();
        int[] counts = fields.counts();
        byte[] bytes = new byte[counts[0] * fields.type().bytes()];
        ByteBuffer row = ByteBuffer.wrap(bytes).order(fields.byteOrder());
        for (int k = 0; k < counts[2]; k++) {
            for (int j = 0; j < counts[1]; j++) {
                if (in.readNBytes(bytes, 0, bytes.length) < bytes.length) {
                    throw new EOFException();
                }
                int at = order.first() + j * order.stepJ() + k * order.stepK();
                for (int i = 0; i < counts[0]; i++) {
                    float value = fields.value(row, i);
                    if (!Float.isFinite(value)) {
                        throw new VolumeException(
                                file,
                                "expected finite values, found " + value + " at voxel (" + i + ", " + j + ", " + k
                                        + ")");
                    }
                    values[at + i * order.stepI()] = value;
                }
            }
        }
        return image;
    }
}
