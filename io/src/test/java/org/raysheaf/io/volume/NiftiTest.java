package org.raysheaf.io.volume;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.within;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.SplittableRandom;
import java.util.function.Consumer;
import java.util.zip.GZIPOutputStream;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.EnumSource;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.io.OutsideReader;

class NiftiTest {
    @TempDir
    private Path folder;

    private final Image image = Volumes.image(Volumes.OBLIQUE, 3);
    private byte[] sound = new byte[0];

    @BeforeEach
    void writeASoundFile() throws IOException {
        Path file = folder.resolve("sound.nii");
        VolumeFile.write(image, "kBq/mL", file, false);
        sound = Files.readAllBytes(file);
    }

    private Volume read(byte[] content) throws IOException {
        return VolumeFile.read(Files.write(folder.resolve("a.nii"), content));
    }

    private byte[] changed(Consumer<ByteBuffer> change) {
        byte[] copy = sound.clone();
        change.accept(ByteBuffer.wrap(copy).order(ByteOrder.LITTLE_ENDIAN));
        return copy;
    }

    private void assertRefused(byte[] content, String message) {
        assertThatExceptionOfType(VolumeException.class)
                .isThrownBy(() -> read(content))
                .withMessage(folder.resolve("a.nii") + ": " + message);
    }

    @Test
    void agreesWithNibabelOnShapeAffineValuesAndSpacing() throws Exception {
        OutsideReader.assumePython("nibabel", "numpy");
        Path file = folder.resolve("oblique.nii.gz");
        VolumeFile.write(image, "kBq/mL", file, false);
        String script = """
                import sys, numpy as np, nibabel as nib
                v = nib.load(sys.argv[1]); h = v.header; d = v.get_fdata()
                out = list(v.shape) + list(v.affine.ravel()) + list(v.get_qform().ravel()) + [float(z) for z in h.get_zooms()]
                out += [int(h['sform_code']), int(h['qform_code']), d.sum(), d[0,0,0], d[1,0,0], d[0,1,0], d[5,4,3]]
                print(' '.join(repr(float(x)) for x in out))
                print(h.get_xyzt_units()[0], h['intent_name'].item().decode(), v.get_data_dtype())
                """;

        String[] lines = OutsideReader.python(script, file).split("\n", -1);
        double[] found = Arrays.stream(lines[0].split(" ", -1))
                .mapToDouble(Double::parseDouble)
                .toArray();

        Grid grid = image.grid();
        assertThat(Arrays.copyOf(found, 3)).containsExactly(6, 5, 4);
        double[][] rows = VoxelAffine.of(grid).rows();
        for (int row = 0; row < 3; row++) {
            for (int column = 0; column < 4; column++) {
                // float32 for the rows of sform; its rounding, through a quaternion, for qform
                assertThat(found[3 + 4 * row + column]).isCloseTo(rows[row][column], within(1e-6));
                assertThat(found[19 + 4 * row + column]).isCloseTo(rows[row][column], within(3e-6));
            }
        }
        assertThat(Arrays.copyOfRange(found, 35, 38)).containsExactly(new double[] {0.7, 1.1, 1.3}, within(1e-6));
        assertThat(Arrays.copyOfRange(found, 38, 40)).containsExactly(1, 1);
        assertThat(found[40]).isCloseTo(image.sum(), within(1e-9));
        assertThat(Arrays.copyOfRange(found, 41, 45))
                .containsExactly(image.at(0, 0, 0), image.at(1, 0, 0), image.at(0, 1, 0), image.at(5, 4, 3));
        assertThat(lines[1]).isEqualTo("mm kBq/mL float32");
    }

    @Test
    void readsWhatNibabelWrote() throws Exception {
        OutsideReader.assumePython("nibabel", "numpy");
        Path file = folder.resolve("foreign.nii.gz");
        String script = """
                import sys, numpy as np, nibabel as nib
                d = np.arange(24, dtype=np.int16).reshape(2, 3, 4)
                v = nib.Nifti1Image(d, np.array([[-2., 0, 0, 10], [0, 3, 0, -20], [0, 0, 4, 30], [0, 0, 0, 1]]))
                v.header.set_xyzt_units('mm')
                v.header.set_slope_inter(0.5, 1)
                nib.save(v, sys.argv[1])
                """;
        OutsideReader.python(script, file);

        Volume volume = VolumeFile.read(file);

        Image read = volume.image();
        assertThat(volume.unit()).isEmpty();
        assertThat(read.grid().pose().u()).isEqualTo(Vector3.X);
        // The array holds d[i, j, k] = 12 i + 4 j + k, the file says that values are 0.5 d + 1, and x runs the other
        // way.
        assertThat(read.at(1, 2, 3)).isEqualTo(6.5f);
        assertThat(read.at(0, 1, 0)).isEqualTo(9f);
    }

    @ParameterizedTest
    @EnumSource(NiftiType.class)
    void readsEveryTypeInBothByteOrders(NiftiType type) throws IOException {
        for (ByteOrder byteOrder : new ByteOrder[] {ByteOrder.LITTLE_ENDIAN, ByteOrder.BIG_ENDIAN}) {
            ByteBuffer out = ByteBuffer.allocate(352 + 2 * type.bytes()).order(byteOrder);
            out.putInt(0, 348).putShort(NiftiHeader.DIM, (short) 3).putShort(NiftiHeader.DIM + 2, (short) 2);
            out.putShort(NiftiHeader.DIM + 4, (short) 1).putShort(NiftiHeader.DIM + 6, (short) 1);
            out.putShort(NiftiHeader.DATATYPE, (short) type.code());
            out.putShort(NiftiHeader.BITPIX, (short) (8 * type.bytes()));
            for (int i = 1; i <= 3; i++) {
                out.putFloat(NiftiHeader.PIXDIM + 4 * i, 0.25f + 0.05f * i);
            }
            out.putFloat(NiftiHeader.VOX_OFFSET, 352).putFloat(NiftiHeader.SCL_SLOPE, 2);
            out.putFloat(NiftiHeader.SCL_INTER, -1)
                    .putInt(NiftiHeader.MAGIC, byteOrder == ByteOrder.BIG_ENDIAN ? 0x6e2b3100 : 0x00312b6e);
            put(out, type, 352, 7);
            put(out, type, 352 + type.bytes(), -1);

            Image read = read(out.array()).image();

            double second = type == NiftiType.UINT8 ? 255 : type == NiftiType.UINT16 ? 65535 : -1;
            assertThat(read.values()).containsExactly(13, (float) (2 * second - 1));
            // Neither sform nor qform: centred on the origin.
            assertThat(read.grid().centre(0, 0, 0)).isEqualTo(new Vector3(-0.15, 0, 0));
            assertThat(read.grid().spacingZMm()).isEqualTo(0.4);
        }
    }

    private static void put(ByteBuffer out, NiftiType type, int at, int value) {
        switch (type) {
            case UINT8, INT8 -> out.put(at, (byte) value);
            case INT16, UINT16 -> out.putShort(at, (short) value);
            case INT32 -> out.putInt(at, value);
            case FLOAT32 -> out.putFloat(at, value);
            case FLOAT64 -> out.putDouble(at, value);
        }
    }

    @Test
    void takesTheQformWhereThereIsNoSform() throws IOException {
        Grid grid = read(changed(b -> b.putShort(NiftiHeader.SFORM_CODE, (short) 0)))
                .image()
                .grid();

        Vector3 difference = grid.centre(5, 4, 3).minus(Volumes.OBLIQUE.centre(5, 4, 3));
        assertThat(difference.norm()).isCloseTo(0, within(1e-5));
    }

    @Test
    void turnsALeftHandedQformRight() throws IOException {
        Volume volume =
                read(changed(b -> b.putShort(NiftiHeader.SFORM_CODE, (short) 0).putFloat(NiftiHeader.PIXDIM, -1)));

        Grid grid = volume.image().grid();
        assertThat(volume.image().at(1, 2, 0)).isEqualTo(image.at(1, 2, 3));
        assertThat(grid.pose().w().minus(Volumes.OBLIQUE.pose().w()).norm()).isCloseTo(0, within(1e-6));
    }

    @Test
    void readsLengthsInMetresAndMicrometres() throws IOException {
        assertThat(read(changed(b -> b.put(NiftiHeader.XYZT_UNITS, (byte) 1)))
                        .image()
                        .grid()
                        .spacingYMm())
                .isCloseTo(1100, within(1e-3));
        assertThat(read(changed(b -> b.put(NiftiHeader.XYZT_UNITS, (byte) 3)))
                        .image()
                        .grid()
                        .spacingYMm())
                .isCloseTo(1.1e-3, within(1e-9));
    }

    @Test
    void takesASlopeOfZeroForNoScaling() throws IOException {
        Volume volume = read(changed(b -> b.putFloat(NiftiHeader.SCL_SLOPE, 0).putFloat(NiftiHeader.SCL_INTER, 9)));

        assertThat(volume.image().values()).isEqualTo(image.values());
    }

    @Test
    void skipsExtensions() throws IOException {
        ByteArrayOutputStream content = new ByteArrayOutputStream();
        content.write(changed(b -> b.putFloat(NiftiHeader.VOX_OFFSET, 400).put(348, (byte) 1)), 0, 352);
        content.write(new byte[48]);
        content.write(sound, 352, sound.length - 352);

        assertThat(read(content.toByteArray()).image().values()).isEqualTo(image.values());
    }

    @Test
    void tellsForeignFilesApart() {
        assertRefused(
                new byte[10], "expected a NIfTI-1 header of 348 bytes, found 10; the file is cut short or no NIfTI");
        assertRefused(new byte[400], "expected a NIfTI-1 file, found none: its header size is 0, not 348");
        assertRefused(changed(b -> b.putInt(0, 540)), "expected NIfTI-1, found NIfTI-2; save it as NIfTI-1");
        assertRefused(
                changed(b -> b.put(NiftiHeader.MAGIC + 1, (byte) 'i')),
                "field magic: expected a single file (n+1), found a pair of files (ni1); save it as one .nii");
        assertRefused(changed(b -> b.put(NiftiHeader.MAGIC, (byte) 'x')), "field magic: expected n+1, found \"x+1\"");
    }

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                "40|9|field dim[0]: expected 3 axes, found 9",
                "44|-5|field dim[2]: expected at least 1 voxel, found -5",
                "70|128|field datatype: expected one of 2 (UINT8), 4 (INT16), 8 (INT32), 16 (FLOAT32), 64 (FLOAT64), 256"
                        + " (INT8), 512 (UINT16), found 128",
                "72|8|field bitpix: expected 32, found 8",
                "122|7424|field xyzt_units: expected m, mm or µm (1, 2, 3), found 5",
                "42|32767|expected 2621712 bytes as its header says, found 832; the file is cut short"
            })
    void refusesFieldsThatCannotBe(int offset, int value, String message) {
        if (offset == 122) {
            assertRefused(changed(b -> b.put(NiftiHeader.XYZT_UNITS, (byte) 5)), message);
        } else {
            assertRefused(changed(b -> b.putShort(offset, (short) value)), message);
        }
    }

    @Test
    void refusesASeriesOfVolumes() {
        assertRefused(
                changed(b -> b.putShort(NiftiHeader.DIM, (short) 4).putShort(NiftiHeader.DIM + 8, (short) 3)),
                "field dim[4]: expected one volume, found 3; split the series");
    }

    @Test
    void refusesSkewedAxes() {
        assertRefused(
                changed(b -> b.putFloat(NiftiHeader.SROW, 3)),
                "expected voxel axes at right angles, found 81.335 degrees; resample the volume onto a box-shaped grid");
    }

    @Test
    void refusesValuesThatAreNotFinite() {
        int index = 352 + 4 * (2 + 6 * (1 + 5 * 3));

        assertRefused(
                changed(b -> b.putFloat(index, Float.NaN)), "expected finite values, found NaN at voxel (2, 1, 3)");
        assertRefused(
                changed(b -> b.putFloat(NiftiHeader.SCL_SLOPE, Float.NaN)),
                "field scl_slope: expected finite scaling, found NaN and 0.0");
    }

    @Test
    void refusesPackedFilesThatAreCutShortOrDamaged() throws IOException {
        ByteArrayOutputStream packed = new ByteArrayOutputStream();
        try (GZIPOutputStream out = new GZIPOutputStream(packed)) {
            out.write(sound);
        }
        byte[] whole = packed.toByteArray();
        assertThat(read(whole).image().values()).isEqualTo(image.values());

        assertRefused(
                Arrays.copyOf(whole, whole.length - 100), "expected more bytes, found the end; the file is cut short");
        byte[] checksum = whole.clone();
        checksum[whole.length - 6] ^= 1;
        assertRefused(checksum, "expected a sound gzip stream, found it damaged: Corrupt GZIP trailer");
        byte[] huge = changed(b -> b.putShort(42, (short) 32767).putShort(44, (short) 32767));
        packed.reset();
        try (GZIPOutputStream out = new GZIPOutputStream(packed)) {
            out.write(huge);
        }
        assertThatExceptionOfType(VolumeException.class)
                .isThrownBy(() -> read(packed.toByteArray()))
                .withMessageContaining("expected fewer than 2^31 voxels");
    }

    /** A flipped bit in a value may go unseen; wherever it is, the file either reads or is refused. */
    @Test
    void neitherCrashesNorHangsOnDamagedFiles() throws IOException {
        SplittableRandom random = new SplittableRandom(20260302);
        int refused = 0;
        for (int i = 0; i < 1000; i++) {
            byte[] damaged = sound.clone();
            damaged[random.nextInt(NiftiHeader.VOXELS_AT)] ^= (byte) (1 << random.nextInt(8));
            try {
                read(damaged);
            } catch (VolumeException expected) {
                refused++;
                assertThat(expected)
                        .hasMessageStartingWith(folder.resolve("a.nii").toString());
            }
        }
        // Of the header about a third is in use.
        assertThat(refused).isBetween(50, 500);
    }
}
