package org.raysheaf.quality;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Random;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;

class HalfDifferenceTest {
    private static final Grid GRID = Grid.centred(20, 20, 20, 1);

    /** Halves with noise √2 · 10 % stand for a whole with 10 %. */
    @Test
    void givesTheNoiseOfTheWhole() {
        Random random = new Random(1);
        Image odd = new Image(GRID);
        Image even = new Image(GRID);
        for (int j = 0; j < GRID.voxels(); j++) {
            odd.values()[j] = (float) (50 * (1 + 0.1 * Math.sqrt(2) * random.nextGaussian()));
            even.values()[j] = (float) (50 * (1 + 0.1 * Math.sqrt(2) * random.nextGaussian()));
        }
        HalfDifference noise = HalfDifference.of(odd, even, Image.filled(GRID, 1));
        assertThat(noise.relativeNoise()).isCloseTo(0.1, within(4 * noise.relativeNoiseError()));
        assertThat(noise.mean()).isCloseTo(50, within(4 * 50 * 0.1 / Math.sqrt(8000)));
        assertThat(noise.relativeDifference()).isCloseTo(0, within(4 * 0.1 / Math.sqrt(8000)));
        assertThat(noise.voxels()).isEqualTo(8000);
    }

    @Test
    void refusesAnEmptyRegion() {
        Image image = Image.filled(GRID, 1);
        assertThatThrownBy(() -> HalfDifference.of(image, image, new Image(GRID)))
                .hasMessage("expected a region with activity, found 0 voxels");
    }
}
