package org.raysheaf.geometry.frame;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.settings.InvalidSettingsException;

class GridTest {
    private static final Grid OBLIQUE = new Grid(
            4, 3, 5, 0.5, 1.5, 2, Pose.shift(new Vector3(7, -2, 1)).after(Pose.rotation(new Vector3(1, 2, 3), 0.7)));

    @Test
    void indexRunsThroughAllVoxelsWithZFastest() {
        int expected = 0;
        for (int x = 0; x < 4; x++) {
            for (int y = 0; y < 3; y++) {
                for (int z = 0; z < 5; z++) {
                    assertThat(OBLIQUE.index(x, y, z)).isEqualTo(expected++);
                }
            }
        }
        assertThat(OBLIQUE.voxels()).isEqualTo(expected);
    }

    @Test
    void indicesUndoCentre() {
        for (int x = 0; x < 4; x++) {
            for (int z = 0; z < 5; z++) {
                Vector3 back = OBLIQUE.indices(OBLIQUE.centre(x, 1.25, z));
                assertThat(back.minus(new Vector3(x, 1.25, z)).norm()).isLessThan(1e-12);
            }
        }
    }

    @Test
    void poseOriginIsTheMiddleOfTheLattice() {
        assertThat(OBLIQUE.centre(1.5, 1, 2).minus(OBLIQUE.pose().origin()).norm())
                .isLessThan(1e-12);
        Grid centred = Grid.centred(2, 2, 3, 4);
        assertThat(centred.centre(0, 1, 1)).isEqualTo(new Vector3(-2, 2, 0));
        assertThat(centred.voxelVolumeMm3()).isEqualTo(64);
    }

    @Test
    void refusesShapesThatAreNoGrid() {
        assertThatThrownBy(() -> new Grid(0, 1, 1, 1, Double.NaN, 0, Pose.IDENTITY))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("nx: expected a number >= 1, found 0")
                .hasMessageContaining("spacing_y_mm: expected a number > 0, found NaN")
                .hasMessageContaining("spacing_z_mm");
        assertThatThrownBy(() -> Grid.centred(2000, 2000, 2000, 1)).hasMessageContaining("take larger voxels");
    }
}
