package org.raysheaf.io.volume;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Locale;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.io.file.AtomicFile;

/**
 * Reads and writes volumes; the ending of the name chooses the format: {@code .nii} and {@code .nii.gz} are NIfTI-1, {@code .h5} is HDF5.
 * Safe for use by several threads on different files.
 *
 * <p>An HDF5 volume is a dataset {@code values} of shape [nz][ny][nx] with the attributes
 *
 * <table>
 *   <caption>Attributes of the dataset {@code values}</caption>
 *   <tr><th>name</th><th>type</th><th>meaning</th></tr>
 *   <tr><td>{@code unit}</td><td>text</td><td>unit of the values; may be missing</td></tr>
 *   <tr><td>{@code spacing_mm}</td><td>float64 [3]</td><td>voxel pitch along x, y, z</td></tr>
 *   <tr><td>{@code affine}</td><td>float64 [4][4]</td><td>takes (i, j, k, 1), counted from 0 along x, y, z, to (x, y, z, 1) in mm; if
 *       missing, the grid is centred on the origin with its axes along the world's</td></tr>
 * </table>
 */
public final class VolumeFile {
    private VolumeFile() {}

    /**
     * Reads a volume.
     *
     * @param file a NIfTI-1 or HDF5 file; values of any common type, scaled as the file says
     * @return the volume; if the file's axes are left-handed, its voxels are reordered until they are right-handed, and stay where they were
     * @throws VolumeException if the file is missing, of another format, damaged, cut short, skewed, or holds values that are not finite
     * @throws IOException if reading fails
     */
    public static Volume read(Path file) throws IOException {
        if (!Files.isRegularFile(file)) {
            throw new VolumeException(file, "expected a volume, found no such file");
        }
        return switch (Format.of(file)) {
            case NIFTI, NIFTI_GZ -> new NiftiReader(file).read();
            case HDF5 -> new Hdf5VolumeReader(file).read();
        };
    }

    /**
     * Writes a volume, completely or not at all.
     *
     * @param image the values
     * @param unit the unit of the values, 1 to 15 printable ASCII characters, for example {@code kBq/mL} or {@code 1/mm}
     * @param file the file to make
     * @param replace whether an existing file may be overwritten
     * @throws IllegalArgumentException if a value is not finite, or the unit has another form
     * @throws VolumeException if the format cannot hold the volume
     * @throws IOException if the file exists and may not be overwritten, or writing fails
     */
    public static void write(Image image, String unit, Path file, boolean replace) throws IOException {
        Format format = Format.of(file);
        requireUnit(unit);
        requireFinite(image);
        AtomicFile.write(file, replace, temporary -> {
            switch (format) {
                case NIFTI -> new NiftiWriter(file).write(List.of(image), unit, temporary, false);
                case NIFTI_GZ -> new NiftiWriter(file).write(List.of(image), unit, temporary, true);
                case HDF5 -> new Hdf5VolumeWriter(file).write(image, unit, temporary);
            }
        });
    }

    /**
     * Writes several volumes on one grid as a series: a NIfTI-1 file of four dimensions, the last of which counts the volumes. Completely or
     * not at all.
     *
     * @param images the volumes, at least one, at most 32,767, on the same grid
     * @param unit the unit of the values, 1 to 15 printable ASCII characters
     * @param file the file to make, ending in {@code .nii} or {@code .nii.gz}
     * @param replace whether an existing file may be overwritten
     * @throws IllegalArgumentException if a value is not finite, the unit has another form, or grids differ
     * @throws VolumeException if the format cannot hold the series
     * @throws IOException if the file exists and may not be overwritten, or writing fails
     */
    public static void writeSeries(List<Image> images, String unit, Path file, boolean replace) throws IOException {
        Format format = Format.of(file);
        if (format == Format.HDF5) {
            throw new VolumeException(file, "expected a name ending in .nii or .nii.gz for a series");
        }
        requireUnit(unit);
        for (Image image : images) {
            requireFinite(image);
            if (!image.grid().equals(images.get(0).grid())) {
                throw new IllegalArgumentException("the volumes of a series need one grid");
            }
        }
        AtomicFile.write(
                file,
                replace,
                temporary -> new NiftiWriter(file).write(images, unit, temporary, format == Format.NIFTI_GZ));
    }

    private enum Format {
        NIFTI,
        NIFTI_GZ,
        HDF5;

        static Format of(Path file) throws VolumeException {
            String name = String.valueOf(file.getFileName()).toLowerCase(Locale.ROOT);
            if (name.endsWith(".nii")) {
                return NIFTI;
            }
            if (name.endsWith(".nii.gz")) {
                return NIFTI_GZ;
            }
            if (name.endsWith(".h5")) {
                return HDF5;
            }
            throw new VolumeException(file, "expected a name ending in .nii, .nii.gz or .h5");
        }
    }

    private static void requireUnit(String unit) {
        boolean printable = unit.chars().allMatch(c -> c > ' ' && c < 127);
        if (unit.isEmpty() || unit.length() > NiftiHeader.LONGEST_UNIT || !printable) {
            throw new IllegalArgumentException("a unit needs 1 to " + NiftiHeader.LONGEST_UNIT
                    + " printable ASCII characters: found \"" + unit + "\"");
        }
    }

    private static void requireFinite(Image image) {
        float[] values = image.values();
        for (int i = 0; i < values.length; i++) {
            if (!Float.isFinite(values[i])) {
                throw new IllegalArgumentException(
                        "a volume file needs finite values: found " + values[i] + " at index " + i);
            }
        }
    }
}
