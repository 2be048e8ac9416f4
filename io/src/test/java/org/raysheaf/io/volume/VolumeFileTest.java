package org.raysheaf.io.volume;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatIOException;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;

class VolumeFileTest {
    /** NIfTI stores float32: 24 bits of coordinates of about 10 mm. */
    private static final double FLOAT32_MM = 2e-6;

    @TempDir
    private Path folder;

    @ParameterizedTest
    @ValueSource(strings = {"a.nii", "a.nii.gz", "a.h5", "A.NII.GZ"})
    void readsBackWhatItWrote(String name) throws IOException {
        for (Grid grid : new Grid[] {Volumes.PLAIN, Volumes.OBLIQUE}) {
            Image image = Volumes.image(grid, 1);
            Path file = folder.resolve(name);

            VolumeFile.write(image, "kBq/mL", file, true);
            Volume volume = VolumeFile.read(file);

            assertThat(volume.unit()).isEqualTo("kBq/mL");
            assertThat(volume.image().values()).isEqualTo(image.values());
            assertSamePlaces(volume.image().grid(), grid);
        }
    }

    @ParameterizedTest
    @ValueSource(strings = {"a.nii", "a.h5"})
    void keepsAnUprightGridExactly(String name) throws IOException {
        VolumeFile.write(Volumes.image(Volumes.PLAIN, 1), "1/mm", folder.resolve(name), false);

        assertThat(VolumeFile.read(folder.resolve(name)).image().grid()).isEqualTo(Volumes.PLAIN);
    }

    private static void assertSamePlaces(Grid found, Grid expected) {
        assertThat(new int[] {found.nx(), found.ny(), found.nz()})
                .containsExactly(expected.nx(), expected.ny(), expected.nz());
        for (int x = 0; x < found.nx(); x++) {
            for (int z = 0; z < found.nz(); z++) {
                Vector3 difference = found.centre(x, 1, z).minus(expected.centre(x, 1, z));
                assertThat(difference.norm()).isCloseTo(0, within(FLOAT32_MM));
            }
        }
    }

    @Test
    void writesTheSameBytesEveryTime() throws IOException {
        Image image = Volumes.image(Volumes.OBLIQUE, 1);
        VolumeFile.write(image, "1/mm", folder.resolve("a.nii.gz"), false);
        VolumeFile.write(image, "1/mm", folder.resolve("b.nii.gz"), false);

        assertThat(folder.resolve("a.nii.gz")).hasSameBinaryContentAs(folder.resolve("b.nii.gz"));
    }

    @Test
    void doesNotOverwriteUnlessAllowed() throws IOException {
        Path file = Files.writeString(folder.resolve("a.nii"), "old");

        assertThatIOException()
                .isThrownBy(() -> VolumeFile.write(new Image(Volumes.PLAIN), "1/mm", file, false))
                .withMessage(file + ": exists already; choose another name, or allow it with --replace");
        assertThat(file).hasContent("old");
    }

    @Test
    void refusesOtherEndingsAndMissingFiles() {
        Path odd = folder.resolve("a.img");
        Path none = folder.resolve("a.nii");

        assertThatExceptionOfType(VolumeException.class)
                .isThrownBy(() -> VolumeFile.write(new Image(Volumes.PLAIN), "1/mm", odd, false))
                .withMessage(odd + ": expected a name ending in .nii, .nii.gz or .h5");
        assertThatExceptionOfType(VolumeException.class)
                .isThrownBy(() -> VolumeFile.read(none))
                .withMessage(none + ": expected a volume, found no such file");
    }

    @Test
    void refusesToWriteWhatNoReaderShouldMeet() {
        Image image = new Image(Volumes.PLAIN);
        image.values()[7] = Float.NaN;
        Path file = folder.resolve("a.nii");

        assertThatIllegalArgumentException()
                .isThrownBy(() -> VolumeFile.write(image, "1/mm", file, false))
                .withMessage("a volume file needs finite values: found NaN at index 7");
        assertThatIllegalArgumentException()
                .isThrownBy(() -> VolumeFile.write(new Image(Volumes.PLAIN), "µSv", file, false))
                .withMessage("a unit needs 1 to 15 printable ASCII characters: found \"µSv\"");
        assertThat(file).doesNotExist();
    }

    @Test
    void refusesMoreVoxelsAlongAnAxisThanNiftiCounts() {
        Path file = folder.resolve("a.nii");

        assertThatExceptionOfType(VolumeException.class)
                .isThrownBy(() -> VolumeFile.write(new Image(Grid.centred(1, 40_000, 1, 1)), "1/mm", file, false))
                .withMessage(file + ": expected at most 32767 voxels along an axis, found 40000; write .h5 instead");
    }
}
