package org.raysheaf.io.volume;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatCode;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.io.OutsideReader;

class Hdf5VolumeTest {
    @TempDir
    private Path folder;

    private void assertRefused(Path file, String message) {
        assertThatExceptionOfType(VolumeException.class)
                .isThrownBy(() -> VolumeFile.read(file))
                .withMessage(file + ": " + message);
    }

    private Path made(String script) throws IOException, InterruptedException {
        Path file = folder.resolve("foreign.h5");
        OutsideReader.python("import sys, numpy as np, h5py\nf = h5py.File(sys.argv[1], 'w')\n" + script, file);
        return file;
    }

    @Test
    void agreesWithH5pyOnShapeValuesAndAttributes() throws Exception {
        OutsideReader.assumePython("h5py", "numpy");
        Image image = Volumes.image(Volumes.OBLIQUE, 5);
        Path file = folder.resolve("a.h5");
        VolumeFile.write(image, "kBq/mL", file, false);
        String script = """
                import sys, h5py
                f = h5py.File(sys.argv[1]); v = f['values']; a = v.attrs['affine']
                unit = v.attrs['unit']; form = f.attrs['raysheaf']
                print(v.shape, v.dtype, unit if isinstance(unit, str) else unit.decode(), form if isinstance(form, str) else form.decode())
                print(*[repr(float(x)) for x in [v[3, 4, 5], v[0, 0, 1], a[0][3], a[1][0], a[3][3], v.attrs['spacing_mm'][2]]])
                """;

        String[] lines = OutsideReader.python(script, file).split("\n", -1);

        assertThat(lines[0]).isEqualTo("(4, 5, 6) float32 kBq/mL volume/1");
        double[] found = Arrays.stream(lines[1].split(" ", -1))
                .mapToDouble(Double::parseDouble)
                .toArray();
        assertThat(found)
                .containsExactly(
                        image.at(5, 4, 3),
                        image.at(1, 0, 0),
                        Volumes.OBLIQUE.centre(0, 0, 0).x(),
                        Volumes.OBLIQUE.pose().u().y() * 0.7,
                        1,
                        1.3);
    }

    @Test
    void readsAPlainVolumeFromH5py() throws Exception {
        OutsideReader.assumePython("h5py", "numpy");
        Path file = made("""
                d = f.create_dataset('values', data=np.arange(24, dtype='u2').reshape(2, 3, 4), compression='gzip')
                d.attrs['spacing_mm'] = [1.0, 2.0, 3.0]
                """);

        Volume volume = VolumeFile.read(file);

        assertThat(volume.unit()).isEmpty();
        assertThat(volume.image().grid().centre(0, 0, 0)).isEqualTo(new Vector3(-1.5, -2, -1.5));
        assertThat(volume.image().at(3, 2, 1)).isEqualTo(23);
        assertThat(volume.image().at(1, 0, 0)).isEqualTo(1);
    }

    @Test
    void saysWhatAForeignFileLacks() throws Exception {
        OutsideReader.assumePython("h5py", "numpy");
        assertRefused(made("f['other'] = [1, 2]"), "expected a dataset values, found [other]");
        assertRefused(made("f['values'] = [1, 2]"), "dataset values: expected 3 axes [nz][ny][nx], found 1");
        assertRefused(
                made("f['values'] = np.ones((2, 2, 2))"),
                "dataset values: expected an attribute affine (float64 [4][4]) or spacing_mm (float64 [3]), found neither");
        assertRefused(
                made("f['values'] = np.full((2, 2, 2), np.nan); f['values'].attrs['spacing_mm'] = [1.0, 1.0, 1.0]"),
                "dataset values: expected finite values, found NaN at [0][0][0]");
        assertRefused(
                made("f['values'] = np.ones((2, 2, 2)); f['values'].attrs['affine'] = [1.0, 1.0, 1.0]"),
                "attribute affine: expected float64 [4][4], found another form");
        assertRefused(
                made("f.attrs['raysheaf'] = 'volume/2'; f['values'] = np.ones((2, 2, 2))"),
                "expected volume/1, found volume/2; it is another kind of file, or too new");
        assertRefused(
                made(
                        "f.create_dataset('values', (30000, 30000, 30000), chunks=(8, 8, 8)).attrs['spacing_mm'] = [1., 1., 1.]"),
                "dataset values: expected 108000000000000 bytes once unpacked, found a file of "
                        + Files.size(folder.resolve("foreign.h5")));
    }

    @Test
    void tellsForeignAndShortFilesApart() throws IOException {
        Path file = folder.resolve("a.h5");
        Files.writeString(file, "a,b,c");
        assertRefused(file, "expected an HDF5 file, found another format");

        VolumeFile.write(Volumes.image(Volumes.PLAIN, 1), "1/mm", file, true);
        byte[] whole = Files.readAllBytes(file);
        Files.write(file, Arrays.copyOf(whole, whole.length - 1));
        assertRefused(
                file, "expected " + whole.length + " bytes, found " + (whole.length - 1) + "; the file is cut short");
    }

    /** One flipped byte in the values cannot be seen; anywhere else the file either reads or is refused. */
    @Test
    void neitherCrashesNorHangsOnDamagedFiles() throws IOException {
        Path file = folder.resolve("a.h5");
        VolumeFile.write(Volumes.image(Volumes.PLAIN, 1), "1/mm", file, true);
        byte[] whole = Files.readAllBytes(file);
        SplittableRandom random = new SplittableRandom(20260301);
        for (int i = 0; i < 300; i++) {
            byte[] damaged = whole.clone();
            damaged[random.nextInt(whole.length)] ^= (byte) (1 << random.nextInt(8));
            Files.write(file, damaged);
            assertThatCode(() -> {
                        try {
                            VolumeFile.read(file);
                        } catch (VolumeException expected) {
                            assertThat(expected).hasMessageStartingWith(file.toString());
                        }
                    })
                    .as("damage %d", i)
                    .doesNotThrowAnyException();
        }
    }
}
