package org.raysheaf.app.proof;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.frame.Image;

/**
 * Absolute activity: the mean of a uniform cylinder must come back as the true kBq/mL with no scale factor, and its profiles must be flat. This
 * holds only if étendue, effective areas, interaction points, sensitivity, projector, decay and branching all agree; each of them, put wrong by a few
 * per cent, breaks it.
 */
class UniformCylinderTest {
    /** Voxels nearer than this to the edge of the cylinder see its blurred rim. */
    private static final double EDGE_MM = 3;

    private static final double INNER_MM = UniformCylinder.RADIUS_MM - EDGE_MM;
    private static final double INNER_HALF_MM = 0.5 * UniformCylinder.LENGTH_MM - EDGE_MM;
    private static final ForkJoinPool POOL = new ForkJoinPool();

    @AfterAll
    static void close() {
        POOL.shutdown();
    }

    /** 300,000 events and wide crystals: 2 % for the model, as for the fine ones, and 1 % for counting and a coarse grid. */
    @Test
    void comesBackAsBecquerelsPerMillilitre() throws IOException {
        UniformCylinder cylinder = UniformCylinder.coarse(12.2, 13, POOL);
        Image image = cylinder.reconstruct(cylinder.record(300_000), 20);
        double[] mean = UniformCylinder.mean(image, 0, INNER_MM - 2, -INNER_HALF_MM + 2, INNER_HALF_MM - 2);
        assertThat(mean[0]).isCloseTo(1, within(0.03));
    }

    @Test
    @Tag("proof")
    void perfectlyAbsorbingFacesComeBackWithinOnePerCent() throws IOException {
        UniformCylinder cylinder = UniformCylinder.heron12(0, 0.1, POOL);
        proveFlat(cylinder.reconstruct(cylinder.record(2_000_000), 20), 0.01);
    }

    @Test
    @Tag("proof")
    void deepCrystalsComeBackWithinTwoPerCent() throws IOException {
        UniformCylinder cylinder = UniformCylinder.heron12(12.2, 13, POOL);
        proveFlat(cylinder.reconstruct(cylinder.record(2_000_000), 20), 0.02);
    }

    private static void proveFlat(Image image, double tolerance) {
        double[] whole = UniformCylinder.mean(image, 0, INNER_MM, -INNER_HALF_MM, INNER_HALF_MM);
        assertThat(whole[0]).isCloseTo(1, within(tolerance));
        int profiles = 0;
        for (double r = 0; r < INNER_MM; r += 1) {
            profiles += flat(whole, UniformCylinder.mean(image, r, r + 1, -INNER_HALF_MM, INNER_HALF_MM));
        }
        for (double z = -INNER_HALF_MM; z + 2 <= INNER_HALF_MM; z += 2) {
            profiles += flat(whole, UniformCylinder.mean(image, 0, INNER_MM, z, z + 2));
        }
        // Most of the 15 rings and 19 slices are known well enough to count.
        assertThat(profiles).isGreaterThan(28);
    }

    /** A ring or slice whose standard error is below 1 % must be within 3 % of the mean; others are not counted. */
    private static int flat(double[] whole, double[] part) {
        if (part[1] >= 0.01) {
            return 0;
        }
        assertThat(part[0] / whole[0]).isCloseTo(1, within(0.03));
        return 1;
    }
}
