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
import org.raysheaf.geometry.frame.Vector3;

/**
 * Events whose rays end at measured points have no finite catalogue; their sensitivity is sampled. A uniform cylinder must still come back as
 * its becquerels per millilitre, flat, whatever the number of rays.
 */
class MeasuredPositionsTest {
    private static final double INNER_MM = UniformCylinder.RADIUS_MM - 3;
    /** Many rays undo blur, and overshoot by some per cent within 5 mm of an edge, as every such reconstruction does. */
    private static final double FLAT_MM = 12;

    /** 1 % for the model, 0.25 % for counting a million events. */
    private static final double WHOLE = 0.0125;

    private static final ForkJoinPool POOL = new ForkJoinPool();

    @AfterAll
    static void close() {
        POOL.shutdown();
    }

    @Test
    void slabsOfOnePieceComeBackAsBecquerelsPerMillilitre() throws IOException {
        UniformCylinder cylinder =
                UniformCylinder.slabs(new Vector3(10, 12, 12), 1, Grid.centred(25, 25, 21, 2), 4_000_000, POOL);
        Image image = cylinder.reconstruct(cylinder.record(200_000), 10);
        double half = 0.5 * UniformCylinder.SHORT_MM - 4;
        assertThat(UniformCylinder.mean(image, 0, INNER_MM - 2, -half, half)[0]).isCloseTo(1, within(0.03));
    }

    @ParameterizedTest
    @ValueSource(ints = {1, 4})
    @Tag("proof")
    void slabsComeBackFlat(int rays) throws IOException {
        UniformCylinder cylinder =
                UniformCylinder.slabs(new Vector3(5, 6, 6), rays, Grid.centred(49, 49, 41, 1), Long.MAX_VALUE, POOL);
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
        assertThat(whole[0]).isCloseTo(1, within(WHOLE));
        int profiles = 0;
        for (double r = 0; r + 2 <= FLAT_MM; r += 2) {
            profiles += flat(whole, UniformCylinder.mean(image, r, r + 2, -innerHalfMm, innerHalfMm));
        }
        for (double z = -innerHalfMm; z + 2 <= innerHalfMm; z += 2) {
            profiles += flat(whole, UniformCylinder.mean(image, 0, FLAT_MM, z, z + 2));
        }
        assertThat(profiles).isGreaterThan(12);
    }

    /**
     * A ring or slice is within 2 % of the mean, for the model, and three standard errors. Errors come from the scatter of voxels, which hang
     * together, so they are somewhat too small; parts with more than 1.5 % are not counted.
     */
    private static int flat(double[] whole, double[] part) {
        if (part[1] >= 0.015) {
            return 0;
        }
        assertThat(part[0] / whole[0]).isCloseTo(1, within(0.02 + 3 * part[1]));
        return 1;
    }
}
