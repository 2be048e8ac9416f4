package org.raysheaf.io.volume;

import io.jhdf.HdfFile;
import io.jhdf.Superblock;
import io.jhdf.api.Attribute;
import io.jhdf.api.Dataset;
import io.jhdf.api.Node;
import java.io.IOException;
import java.lang.reflect.Array;
import java.nio.channels.FileChannel;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;

/** Reads volumes from HDF5; {@link VolumeFile} has the layout. Files from elsewhere are welcome if they have the same dataset. */
final class Hdf5VolumeReader {
    static final String FORMAT = "raysheaf";
    static final int VERSION = 1;
    static final String VALUES = "values";
    static final String UNIT = "unit";
    static final String SPACING = "spacing_mm";
    static final String AFFINE = "affine";

    /** No deflate stream unpacks to more than 1032 times its size. */
    private static final long MOST_PACKED = 1032;

    private static final byte[] SIGNATURE = {(byte) 0x89, 'H', 'D', 'F', '\r', '\n', 0x1a, '\n'};

    private final Path file;

    Hdf5VolumeReader(Path file) {
        this.file = file;
    }

    Volume read() throws IOException {
        requireHdf5();
        try {
            requireWhole();
            try (HdfFile in = new HdfFile(file)) {
                requireVersion(in.getAttribute(FORMAT));
                return read(dataset(in));
            }
        } catch (VolumeException e) {
            throw e;
        } catch (RuntimeException e) {
            // The library meets damage with exceptions of any kind.
            throw new VolumeException(file, "expected a sound HDF5 file, found it damaged: " + e.getMessage(), e);
        }
    }

    private void requireHdf5() throws IOException {
        try (var in = Files.newInputStream(file)) {
            if (!Arrays.equals(in.readNBytes(SIGNATURE.length), SIGNATURE)) {
                throw new VolumeException(file, "expected an HDF5 file, found another format");
            }
        }
    }

    /** The library would read garbage beyond the end without a word. */
    private void requireWhole() throws IOException {
        try (FileChannel channel = FileChannel.open(file)) {
            long end = Superblock.readSuperblock(channel, 0).getEndOfFileAddress();
            if (channel.size() < end) {
                throw new VolumeException(
                        file, "expected " + end + " bytes, found " + channel.size() + "; the file is cut short");
            }
        }
    }

    private void requireVersion(@Nullable Attribute format) throws VolumeException {
        String own = "volume/" + VERSION;
        if (format != null && !own.equals(format.getData())) {
            throw new VolumeException(
                    file,
                    "expected " + own + ", found " + format.getData() + "; it is another kind of file, or too new");
        }
    }

    private Dataset dataset(HdfFile in) throws VolumeException {
        Node node = in.getChildren().get(VALUES);
        if (!(node instanceof Dataset dataset)) {
            throw new VolumeException(
                    file,
                    "expected a dataset " + VALUES + ", found "
                            + in.getChildren().keySet());
        }
        int[] shape = dataset.getDimensions();
        if (shape.length != 3) {
            throw new VolumeException(
                    file, "dataset " + VALUES + ": expected 3 axes [nz][ny][nx], found " + shape.length);
        }
        if (dataset.getSizeInBytes() / MOST_PACKED > fileSize()) {
            throw new VolumeException(
                    file,
                    "dataset " + VALUES + ": expected " + dataset.getSizeInBytes()
                            + " bytes once unpacked, found a file of " + fileSize());
        }
        return dataset;
    }

    private long fileSize() throws VolumeException {
        try {
            return Files.size(file);
        } catch (IOException e) {
            throw new VolumeException(file, "expected a readable file, found " + e.getMessage(), e);
        }
    }

    private Volume read(Dataset dataset) throws VolumeException {
        int[] shape = dataset.getDimensions();
        int[] counts = {shape[2], shape[1], shape[0]};
        VoxelOrder order;
        try {
            order = VoxelOrder.of(counts, affine(dataset, counts));
        } catch (IllegalArgumentException e) {
            throw new VolumeException(file, "dataset " + VALUES + ": " + e.getMessage(), e);
        }
        Object flat = dataset.getDataFlat();
        Image image = new Image(order.grid());
        int source = 0;
        for (int k = 0; k < counts[2]; k++) {
            for (int j = 0; j < counts[1]; j++) {
                int at = order.first() + j * order.stepJ() + k * order.stepK();
                for (int i = 0; i < counts[0]; i++) {
                    image.values()[at + i * order.stepI()] = finite(flat, source++, i, j, k);
                }
            }
        }
        Attribute unit = dataset.getAttribute(UNIT);
        return new Volume(image, unit == null ? "" : String.valueOf(unit.getData()));
    }

    private float finite(Object flat, int source, int i, int j, int k) throws VolumeException {
        float value;
        if (flat instanceof float[] floats) {
            value = floats[source];
        } else if (Array.get(flat, source) instanceof Number number) {
            value = number.floatValue();
        } else {
            throw new VolumeException(file, "dataset " + VALUES + ": expected numbers");
        }
        if (!Float.isFinite(value)) {
            throw new VolumeException(
                    file,
                    "dataset " + VALUES + ": expected finite values, found " + value + " at [" + k + "][" + j + "][" + i
                            + "]");
        }
        return value;
    }

    private VoxelAffine affine(Dataset dataset, int[] counts) throws VolumeException {
        Attribute affine = dataset.getAttribute(AFFINE);
        if (affine != null) {
            if (affine.getData() instanceof double[][] rows && rows.length >= 3 && rows[0].length == 4) {
                return VoxelAffine.ofRows(rows[0], rows[1], rows[2]);
            }
            throw new VolumeException(file, "attribute " + AFFINE + ": expected float64 [4][4], found another form");
        }
        Attribute spacing = dataset.getAttribute(SPACING);
        if (spacing != null && spacing.getData() instanceof double[] mm && mm.length == 3) {
            return VoxelAffine.centred(counts[0], counts[1], counts[2], new Vector3(mm[0], mm[1], mm[2]));
        }
        throw new VolumeException(
                file,
                "dataset " + VALUES + ": expected an attribute " + AFFINE + " (float64 [4][4]) or " + SPACING
                        + " (float64 [3]), found neither");
    }
}
