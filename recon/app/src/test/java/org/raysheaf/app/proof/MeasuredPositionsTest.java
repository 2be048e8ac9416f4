package org.raysheaf.app.proof;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;

/**
 * Events whose rays end at measured points have no finite catalogue; their sensitivity is sampled. A uniform cylinder must still come back as
 * its becquerels per millilitre, flat, whatever the number of rays.
 */
class MeasuredPositionsTest {
    private static final double INNER_MM = UniformCylinder.RADIUS_MM - 3;
    private static final ForkJoinPool POOL = new ForkJoinPool();

    @AfterAll
    static void close() {
        POOL.shutdown();
    }

    @Test
    void slabsOfOnePieceComeBackAsBecquerelsPerMillilitre() throws IOException {
        UniformCylinder cylinder = UniformCylinder.slabs(1, Grid.centred(25, 25, 21, 2), POOL);
        Image image = cylinder.reconstruct(cylinder.record(200_000), 10);
        double half = 0.5 * UniformCylinder.SHORT_MM - 4;
        assertThat(UniformCylinder.mean(image, 0, INNER_MM - 2, -half, half)[0]).isCloseTo(1, within(0.03));
    }

    @ParameterizedTest
    @ValueSource(ints = {1, 4})
    @Tag("proof")
    void slabsComeBackFlat(int rays) throws IOException {
        UniformCylinder cylinder = UniformCylinder.slabs(rays, Grid.centred(49, 49, 41, 1), POOL);
        proveFlat(cylinder.reconstruct(cylinder.record(1_000_000), 20), 0.5 * UniformCylinder.SHORT_MM - 3);
    }

    @ParameterizedTest
    @ValueSource(ints = {1, 4})
    @Tag("proof")
    void crystalsWithMeasuredDepthComeBackFlat(int rays) throws IOException {
        UniformCylinder cylinder = UniformCylinder.withDepth(3, rays, POOL);
        proveFlat(cylinder.reconstruct(cylinder.record(1_000_000), 20), 0.5 * UniformCylinder.LENGTH_MM - 3);
    }

    private static void proveFlat(Image image, double innerHalfMm) {
        double[] whole = UniformCylinder.mean(image, 0, INNER_MM, -innerHalfMm, innerHalfMm);
        System.err.printf("whole %.4f %.4f%n", whole[0], whole[1]);
        for (double r = 0; r < INNER_MM; r += 1.5) {
            double[] ring = UniformCylinder.mean(image, r, r + 1.5, -innerHalfMm, innerHalfMm);
            System.err.printf("ring %.1f  %.4f %.4f%n", r, ring[0] / whole[0], ring[1]);
        }
        for (double z = -innerHalfMm; z + 2 <= innerHalfMm; z += 2) {
            double[] slice = UniformCylinder.mean(image, 0, INNER_MM, z, z + 2);
            System.err.printf("slice %.1f  %.4f %.4f%n", z, slice[0] / whole[0], slice[1]);
        }
        assertThat(whole[0]).isCloseTo(1, within(0.02));
    }
}
