package org.raysheaf.quality;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Random;
import org.junit.jupiter.api.Test;
import org.raysheaf.engine.GaussianFilter;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;

class HalfDifferenceTest {
    private static final Grid GRID = Grid.centred(24, 24, 24, 1);

    /** One half: noise of √2 times the given relative noise, smoothed and scaled back to about that if a width is given. */
    private static Image half(Random random, double noise, double fwhmMm) {
        Image image = new Image(GRID);
        for (int j = 0; j < image.values().length; j++) {
            image.values()[j] = (float) random.nextGaussian();
        }
        Image smooth = fwhmMm > 0 ? GaussianFilter.apply(image, fwhmMm) : image;
        // Scaled by the power of infinitely many (σ = FWHM / √(8 ln 2)): a realisation's own would hide how power
        // varies.
        double sigma = fwhmMm / Math.sqrt(8 * Math.log(2));
        double expected = fwhmMm > 0 ? Math.pow(2 * sigma * Math.sqrt(Math.PI), -1.5) : 1;
        for (int j = 0; j < smooth.values().length; j++) {
            smooth.values()[j] = (float) (50 * (1 + noise * Math.sqrt(2) * smooth.values()[j] / expected));
        }
        return smooth;
    }

    /** Halves with noise √2 · 10 % stand for a whole with 10 %; noise in the weights adds about ε²/2 = 0.5 % of that. */
    @Test
    void givesTheNoiseOfTheWhole() {
        Random random = new Random(1);
        HalfDifference noise = HalfDifference.of(half(random, 0.1, 0), half(random, 0.1, 0));
        double error = noise.standardError().orElseThrow();
        assertThat(error).isCloseTo(0.1 / Math.sqrt(2 * 13824.0), within(0.3 * 0.1 / Math.sqrt(2 * 13824.0)));
        assertThat(noise.relativeNoise()).isCloseTo(0.1 * 1.005, within(4 * error));
        assertThat(noise.relativeDifference()).isCloseTo(0, within(4 * 0.1 / Math.sqrt(13824)));
        assertThat(noise.correlationMm()).isCloseTo(1, within(0.1));
        assertThat(noise.blocks()).isCloseTo(216, within(1.0));
    }

    /**
     * The error that is stated against the scatter over 60 images whose neighbouring voxels have noise in common. The scatter is known to
     * 9 %; errors that take voxels as independent would be five times too small.
     */
    @Test
    void statesAnErrorThatHoldsForCorrelatedNoise() {
        Random random = new Random(2);
        int n = 60;
        double sum = 0;
        double squares = 0;
        double errors = 0;
        for (int i = 0; i < n; i++) {
            HalfDifference noise = HalfDifference.of(half(random, 0.1, 2.2), half(random, 0.1, 2.2));
            sum += noise.relativeNoise();
            squares += noise.relativeNoise() * noise.relativeNoise();
            errors += noise.standardError().orElseThrow() / n;
        }
        double scatter = Math.sqrt((squares - sum * sum / n) / (n - 1));
        assertThat(errors / scatter).isBetween(0.7, 1.3);
    }

    /** A bright voxel of noise is one voxel's worth of activity, not a new threshold for all others. */
    @Test
    void doesNotHangOnOneVoxel() {
        Random random = new Random(3);
        Image odd = half(random, 0.1, 0);
        Image even = half(random, 0.1, 0);
        double before = HalfDifference.of(odd, even).relativeNoise();
        odd.values()[4000] = 5000;
        even.values()[4000] = 4000;
        // 4,500 of 691,200 in activity, at a noise of 500/4,500.
        assertThat(HalfDifference.of(odd, even).relativeNoise()).isCloseTo(before, within(0.01 * before));
    }

    @Test
    void statesNoErrorFromFewBlocks() {
        Image odd = new Image(GRID);
        Image even = new Image(GRID);
        for (int z = 0; z < 4; z++) {
            odd.values()[GRID.index(3, 3, z)] = 50 + z % 2;
            even.values()[GRID.index(3, 3, z)] = 51 - z % 2;
        }
        assertThat(HalfDifference.of(odd, even).standardError()).isEmpty();
    }

    @Test
    void refusesWhatHasNoNoise() {
        Image nothing = new Image(GRID);
        assertThatThrownBy(() -> HalfDifference.of(nothing, nothing))
                .hasMessage("expected halves with activity, found sums of 0.0 and 0.0");
        Image broken = Image.filled(GRID, 1);
        broken.values()[7] = Float.NaN;
        assertThatThrownBy(() -> HalfDifference.of(broken, Image.filled(GRID, 1)))
                .hasMessage("expected halves of finite values, found a sum of NaN");
        assertThatThrownBy(() -> HalfDifference.of(Image.filled(Grid.centred(3, 3, 3, 1), 1), nothing))
                .hasMessage("expected two images on one grid");
    }
}
