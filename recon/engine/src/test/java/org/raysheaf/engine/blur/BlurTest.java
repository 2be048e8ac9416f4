package org.raysheaf.engine.blur;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Random;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Material;

final class BlurTest {
    private static final Grid GRID = Grid.centred(23, 20, 17, 2);
    private static final Lattice LATTICE = new Lattice(GRID);
    private static final ForkJoinPool POOL = new ForkJoinPool(2);
    private static final DetectorSystem RING = ring();
    private static final Mixture TWO = new Mixture(List.of(new Mixture.Part(0.6, 0.7), new Mixture.Part(0.4, 3)));
    /** Single precision, a few hundred terms of one sign. */
    private static final double ROUNDING = 2e-6;

    @AfterAll
    static void stop() {
        POOL.shutdown();
    }

    /** A finely cut ring of radius 42 mm whose width and acollinearity are large enough to see. */
    private static DetectorSystem ring() {
        CrystalBlock tile =
                new CrystalBlock("tile", 11, 30, 1, new Vector3(1.98, 2, 0.1), new Vector3(1.98, 2, 0.1), "crystal");
        return new DetectorSystem(new SystemDescription(
                "ring",
                new FieldOfView(30, 60),
                new PairRule(1),
                List.of(new Material("crystal", 12)),
                List.of(tile),
                List.of(new Placement.Rings("tile", 12, 42, 0, List.of(0.0)))));
    }

    private static BlurModel varying() {
        return new BlurModel(TWO, ChordWidths.of(RING, GRID, 3, true, POOL));
    }

    private static float[] random(long seed, float[] support) {
        Random random = new Random(seed);
        float[] values = new float[LATTICE.size()];
        for (int j = 0; j < values.length; j++) {
            values[j] = support[j] * random.nextFloat();
        }
        return values;
    }

    private static float[] all() {
        return LATTICE.fromImage(Image.filled(GRID, 1));
    }

    private static double dot(float[] a, float[] b) {
        double sum = 0;
        for (int j = 0; j < a.length; j++) {
            sum += (double) a[j] * b[j];
        }
        return sum;
    }

    @ParameterizedTest
    @ValueSource(booleans = {false, true})
    void transposeIsAdjointAndCountsAreKept(boolean masked) {
        float[] support = masked ? random(9, all()) : all();
        for (int j = 0; j < support.length; j++) {
            support[j] = support[j] > 0.3 ? 1 : 0;
        }
        Blur blur = new Blur(varying(), LATTICE, support, POOL);
        float[] x = random(1, support);
        float[] u = random(2, all());
        float[] bx = new float[x.length];
        float[] bu = new float[x.length];
        blur.apply(x, bx);
        blur.transpose(u.clone(), bu);
        assertThat(dot(bx, u) / dot(x, bu)).isCloseTo(1, within(1e-6));
        assertThat(dot(bx, all()) / dot(x, all())).isCloseTo(1, within(1e-6));
        float[] columns = new float[x.length];
        blur.transpose(all(), columns);
        for (int j = 0; j < columns.length; j++) {
            assertThat((double) columns[j]).isCloseTo(support[j], within(ROUNDING));
            assertThat(bx[j] >= 0 && (support[j] > 0 || bx[j] == 0)).isTrue();
        }
    }

    @Test
    void aPointGetsTheVarianceOfTheModelAndTheShapeOfGaussians() {
        double sigma = 2.9;
        Blur blur = new Blur(
                new BlurModel(new Mixture(List.of(new Mixture.Part(0.5, sigma), new Mixture.Part(0.5, 0.4))), null),
                LATTICE,
                all(),
                POOL);
        Image point = new Image(GRID);
        point.values()[GRID.index(11, 10, 8)] = 1;
        float[] blurred = new float[LATTICE.size()];
        blur.apply(LATTICE.fromImage(point), blurred);
        Image image = LATTICE.toImage(blurred);
        double[] variance = new double[3];
        for (int x = 0; x < GRID.nx(); x++) {
            for (int y = 0; y < GRID.ny(); y++) {
                for (int z = 0; z < GRID.nz(); z++) {
                    double value = image.at(x, y, z);
                    variance[0] += value * 4 * (x - 11) * (x - 11);
                    variance[1] += value * 4 * (y - 10) * (y - 10);
                    variance[2] += value * 4 * (z - 8) * (z - 8);
                }
            }
        }
        // a thousandth for the tails cut off
        double expected = 0.5 * sigma * sigma + 0.5 * 0.16;
        for (double v : variance) {
            assertThat(v).isCloseTo(expected, within(2e-3 * expected));
        }
    }

    /** I_d(t) / I_0(t) by the power series of the modified Bessel functions (Abramowitz &amp; Stegun 9.6.10). */
    private static double besselRatio(int d, double t) {
        double[] sums = new double[2];
        for (int i = 0; i < 2; i++) {
            int order = i == 0 ? d : 0;
            double term = 1;
            for (int k = 1; k <= order; k++) {
                term *= 0.5 * t / k;
            }
            for (int k = 0; k < 200; k++) {
                sums[i] += term;
                term *= 0.25 * t * t / ((k + 1.0) * (k + 1 + order));
            }
        }
        return sums[0] / sums[1];
    }

    @Test
    void kernelIsTheGaussianOfTheLattice() {
        float[] wide = Blur.kernel(9);
        for (int d = 1; d < 8; d++) {
            assertThat((double) wide[d] / wide[0]).isCloseTo(besselRatio(d, 9), within(1e-6));
        }
        for (double t : new double[] {1e-4, 0.01, 0.3, 2, 50, 400}) {
            float[] kernel = Blur.kernel(t);
            double sum = kernel[0];
            double variance = 0;
            for (int d = 1; d < kernel.length; d++) {
                sum += 2 * kernel[d];
                variance += 2.0 * d * d * kernel[d];
            }
            assertThat(sum).isBetween(1 - 1.1e-5, 1 + 1e-6);
            if (t > 0.001) {
                assertThat(variance).isCloseTo(t, within(2e-3 * t));
            }
        }
    }

    /**
     * In the middle FWHM 0.00218 D for half a degree (rounded from θ/4), times the mean of 1/sin² of the chords' slopes, artanh(c)/c with the steepest
     * cosine c of a ring 60 mm long; w/√24 for crystals. On a radius r, (R² − r²)² / (4 R √(R² − r²)) of squared levers in the plane.
     */
    @Test
    void chordsHaveTheWidthsOfARing() {
        double radius = 42.5;
        double steepest = 30 / Math.hypot(30, radius);
        double slopes = 0.5 * Math.log((1 + steepest) / (1 - steepest)) / steepest;
        double middle = 0.00218 * 2 * radius * Math.sqrt(slopes);
        Grid flat = Grid.centred(41, 41, 3, 1);
        ChordWidths angle = ChordWidths.of(RING, flat, 0.5, false, POOL);
        ChordWidths crystals = ChordWidths.of(RING, flat, 0, true, POOL);
        // blocks are flat, so distances vary by 3.5 %
        assertThat(angle.centralFwhmMm()).isCloseTo(middle, within(0.03 * middle));
        assertThat(crystals.centralFwhmMm() / Mixture.FWHM_PER_SIGMA).isCloseTo(1.99 / Math.sqrt(24), within(0.01));
        double r2 = radius * radius;
        double lever = (r2 - 400) * (r2 - 400) / (4 * radius * Math.sqrt(r2 - 400)) / (r2 / 4);
        assertThat(angle.varianceMm2(40, 20) / angle.varianceMm2(20, 20)).isCloseTo(lever, within(0.05));
        assertThat(crystals.varianceMm2(40, 20)).isGreaterThan(crystals.varianceMm2(20, 20));
    }

    @Test
    void anyNumberOfThreadsGivesTheSameBits() {
        float[] support = all();
        float[] x = random(3, support);
        float[] first = new float[x.length];
        new Blur(varying(), LATTICE, support, POOL).apply(x, first);
        for (int threads : new int[] {1, 3}) {
            ForkJoinPool pool = new ForkJoinPool(threads);
            float[] again = new float[x.length];
            new Blur(varying(), LATTICE, support, pool).apply(x, again);
            pool.shutdown();
            assertThat(again).isEqualTo(first);
        }
    }
}
