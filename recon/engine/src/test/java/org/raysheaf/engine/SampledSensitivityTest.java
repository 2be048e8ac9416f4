package org.raysheaf.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Test;
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
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.Positions;

class SampledSensitivityTest {
    private static final FieldOfView VIEW = new FieldOfView(24, 28);
    private static final Grid GRID = Grid.centred(17, 17, 11, 3);
    private static final ForkJoinPool POOL = new ForkJoinPool(2);

    @AfterAll
    static void close() {
        POOL.shutdown();
    }

    /** A ring of eight blocks of 10 × 10 absorbing faces, with factors that differ from element to element and from line to line. */
    private static CoincidenceSheaves ring(int rays) {
        DetectorSystem system = new DetectorSystem(new SystemDescription(
                "ring",
                VIEW,
                new PairRule(2),
                List.of(new Material("black", 0)),
                List.of(new CrystalBlock(
                        "block", 10, 10, 1, new Vector3(2.5, 2.5, 1), new Vector3(2.4, 2.4, 1), "black")),
                List.of(new Placement.Rings("block", 8, 40, 0, List.of(0.0)))));
        double[] efficiencies = new double[system.elements()];
        for (int e = 0; e < efficiencies.length; e++) {
            efficiencies[e] = e % 17 == 0 ? 0 : 0.5 + 0.03 * (e % 13);
        }
        return new CoincidenceSheaves(ElementResponse.ofFaces(system))
                .locating(new Positions(rays, false, false))
                .withEfficiencies(efficiencies)
                .with(() -> (a, b, line) -> Math.exp(-0.01 * Math.abs(line.a(0) + line.b(0))));
    }

    private static SampledSensitivity sampled(CoincidenceSheaves sheaves, double error, int seed) {
        return SampledSensitivity.of(
                sheaves.sampler(seed, 0),
                GRID,
                VIEW,
                new SampledSensitivity.Stop(error, 100_000_000),
                POOL,
                Progress.SILENT);
    }

    /**
     * The mean of eight replicates over its estimated error follows Student's law of 7 degrees of freedom in every voxel: variance 7/5, and
     * |z| > 5 in 0.16 % of voxels. Voxels are not independent, so bounds are wide; an error estimate or a factor that is wrong by
     * 2 % of a thousand voxels' common mean breaks them (0.02/0.005 = 4).
     */
    @Test
    void agreesWithTheExactOneWithinItsStandardError() {
        for (int rays : new int[] {1, 4}) {
            CoincidenceSheaves sheaves = ring(rays);
            Image exact = Sensitivity.of(sheaves, GRID, POOL, Progress.SILENT);
            SampledSensitivity sampled = sampled(sheaves, 0.005, 7);
            assertThat(sampled.reached()).isTrue();
            assertThat(sampled.relativeError()).isLessThan(0.005);
            double squares = 0;
            double sum = 0;
            int far = 0;
            int n = 0;
            for (int j = 0; j < GRID.voxels(); j++) {
                float error = sampled.standardError().values()[j];
                if (error > 0) {
                    double z = (sampled.mean().values()[j] - exact.values()[j]) / error;
                    sum += z;
                    squares += z * z;
                    far += Math.abs(z) > 5 ? 1 : 0;
                    n++;
                }
            }
            assertThat(n).isGreaterThan(2000);
            assertThat(sum / n).isCloseTo(0, within(0.5));
            assertThat(squares / n).isBetween(0.9, 2.2);
            assertThat((double) far / n).isLessThan(0.01);
            assertThat(sampled.mean().sum() / exact.sum()).isCloseTo(1, within(0.003));
        }
    }

    @Test
    void resultDoesNotDependOnThreadCount() {
        SampledSensitivity two = sampled(ring(1), 0.02, 3);
        ForkJoinPool one = new ForkJoinPool(1);
        try {
            SampledSensitivity single = SampledSensitivity.of(
                    ring(1).sampler(3, 0),
                    GRID,
                    VIEW,
                    new SampledSensitivity.Stop(0.02, 100_000_000),
                    one,
                    Progress.SILENT);
            assertThat(single.mean().values()).isEqualTo(two.mean().values());
        } finally {
            one.shutdown();
        }
    }

    @Test
    void stopsAtTheNumberOfSheavesAllowed() {
        SampledSensitivity short0 = SampledSensitivity.of(
                ring(1).sampler(1, 0), GRID, VIEW, new SampledSensitivity.Stop(1e-9, 1), POOL, Progress.SILENT);
        assertThat(short0.reached()).isFalse();
        // 20 pairs of blocks, 8 replicates, 128 points
        assertThat(short0.sheaves()).isEqualTo(20 * 8 * 128);
    }

    @Test
    void whatWasKeptComesBack() {
        SampledSensitivity made = sampled(ring(1), 0.05, 2);
        SampledSensitivity kept =
                SampledSensitivity.restore(made.toFloats(), GRID).orElseThrow();
        assertThat(kept.mean().values()).isEqualTo(made.mean().values());
        assertThat(kept.standardError().values()).isEqualTo(made.standardError().values());
        assertThat(kept.sheaves()).isEqualTo(made.sheaves());
        assertThat(kept.relativeError()).isEqualTo(made.relativeError(), within(1e-8));
        assertThat(SampledSensitivity.restore(new float[3], GRID)).isEmpty();
    }

    /** Cubic convolution is exact for second-degree polynomials, also at the edge of the fine grid. */
    @Test
    void interpolationIsExactForParabolas() {
        Grid fine = new Grid(15, 13, 22, 0.7, 0.9, 0.5, GRID.pose());
        Grid coarse = CoarseGrid.around(fine, 2);
        Image image = new Image(coarse);
        fill(image);
        Image expected = new Image(fine);
        fill(expected);
        Image found = CoarseGrid.interpolate(image, fine);
        for (int j = 0; j < fine.voxels(); j++) {
            assertThat(found.values()[j]).isCloseTo(expected.values()[j], within(1e-4f * expected.values()[j]));
        }
    }

    private static void fill(Image image) {
        Grid grid = image.grid();
        for (int x = 0; x < grid.nx(); x++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int z = 0; z < grid.nz(); z++) {
                    Vector3 p = grid.centre(x, y, z);
                    double density = 100 + p.x() - 0.4 * p.y() * p.y() + 0.3 * p.z() * p.x();
                    image.values()[grid.index(x, y, z)] = (float) (density * grid.voxelVolumeMm3());
                }
            }
        }
    }
}
