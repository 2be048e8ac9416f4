package org.raysheaf.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Random;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.Test;
import org.raysheaf.engine.ray.JosephTwin;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;

final class SensitivityTest {
    private static final Grid GRID = Grid.centred(9, 10, 11, 1.5);

    @Test
    void isTheSumOfWeightTimesLength() {
        double[][] rays = rays(200);
        double[] expected = new double[GRID.voxels()];
        for (double[] r : rays) {
            double[] row = JosephTwin.row(
                    GRID,
                    new Vector3((float) r[0], (float) r[1], (float) r[2]),
                    new Vector3((float) r[3], (float) r[4], (float) r[5]));
            for (int j = 0; j < row.length; j++) {
                expected[j] += r[6] * row[j];
            }
        }
        Image sensitivity = compute(rays, 2);
        for (int j = 0; j < expected.length; j++) {
            assertThat((double) sensitivity.values()[j]).isCloseTo(expected[j], within(1e-5 * (1 + expected[j])));
        }
    }

    @Test
    void resultDoesNotDependOnThreadCount() {
        double[][] rays = rays(3000);
        float[] one = compute(rays, 1).values();
        assertThat(compute(rays, 2).values()).isEqualTo(one);
        assertThat(compute(rays, 3).values()).isEqualTo(one);
    }

    @Test
    void ofAnEmptyCatalogueIsZero() {
        assertThat(compute(new double[0][], 1).sum()).isZero();
    }

    private static Image compute(double[][] rays, int threads) {
        ForkJoinPool pool = new ForkJoinPool(threads);
        try {
            return Sensitivity.of(new MemoryList(1, rays, new int[0]), GRID, pool, Progress.SILENT);
        } finally {
            pool.shutdown();
        }
    }

    private static double[][] rays(int count) {
        Random random = new Random(51);
        double[][] rays = new double[count][7];
        for (double[] ray : rays) {
            for (int i = 0; i < 6; i++) {
                ray[i] = 30 * (random.nextDouble() - 0.5);
            }
            ray[6] = random.nextDouble();
        }
        return rays;
    }
}
