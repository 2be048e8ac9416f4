package org.raysheaf.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;

final class GaussianFilterTest {
    /** Stored in single precision. */
    private static final double SINGLE = 1e-6;

    @Test
    void spreadsAPointIntoAGaussianOfThatWidth() {
        Grid grid = new Grid(41, 31, 25, 0.5, 0.7, 1, Pose.IDENTITY);
        Image point = new Image(grid);
        point.values()[grid.index(20, 15, 12)] = 1000;
        Image smooth = GaussianFilter.apply(point, 4);
        double peak = smooth.at(20, 15, 12);
        // Half of the peak at half the width: 2 mm is 4 voxels along x and 2 along z.
        assertThat(smooth.at(24, 15, 12) / peak).isCloseTo(0.5, within(SINGLE));
        assertThat(smooth.at(20, 15, 10) / peak).isCloseTo(0.5, within(SINGLE));
        assertThat(smooth.at(20, 18, 12) / peak).isCloseTo(Math.pow(0.5, Math.pow(2.1 / 2, 2)), within(SINGLE));
    }

    @Test
    void preservesActivityEvenAtTheEdge() {
        Grid grid = new Grid(5, 1, 7, 1, 1, 1, Pose.IDENTITY);
        Image image = new Image(grid);
        image.values()[0] = 3;
        image.values()[grid.index(4, 0, 3)] = 2;
        assertThat(GaussianFilter.apply(image, 6).sum()).isCloseTo(5, within(5 * SINGLE));
        assertThat(image.values()[0]).isEqualTo(3f);
    }

    @Test
    void ofNoWidthChangesNothing() {
        Image image = Image.filled(Grid.centred(3, 3, 3, 1), 2);
        assertThat(GaussianFilter.apply(image, 0).values()).isEqualTo(image.values());
        assertThatThrownBy(() -> GaussianFilter.apply(image, Double.NaN)).hasMessageContaining("fwhmMm=NaN");
    }
}
