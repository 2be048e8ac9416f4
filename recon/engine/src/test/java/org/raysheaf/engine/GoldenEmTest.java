package org.raysheaf.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Test;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.port.Progress;

/** A system of four rows and three unknowns, worked out in full by hand and by an independent double-precision program. */
final class GoldenEmTest {
    private static final double[][] ROWS = {{.30, .10, .05}, {.20, .25, .05}, {.05, .20, .30}, {.05, .05, .20}};
    private static final int[] COUNTS = {120, 160, 220, 100};

    /** Values are printed to eight digits after the point, log-likelihoods to ten. */
    private static final double PRINTED = 0.6e-8;

    private static final double PRINTED_LOG = 0.6e-10 * 10;

    /** The engine works in single precision. */
    private static final double SINGLE = 1e-5;

    private static final double[][] STEPS = {
        {1, 301.11111111, 338.88888889, 360.00000000, 2429.5795715237},
        {2, 278.64310204, 343.69097260, 377.66592536, 2430.9305630320},
        {5, 241.78812816, 358.16923378, 400.04263806, 2432.2478531541},
        {10, 217.04005119, 381.44992034, 401.51002847, 2432.7390314825}
    };

    private static final double[][] STEPS_WITH_BACKGROUND = {
        {1, 13.36781008, 16.02317029, 15.88956531, 1638.2639895708},
        {2, 110.43960676, 152.81859956, 151.73843168, 2302.4280330155}
    };

    private static final ForkJoinPool POOL = new ForkJoinPool(2);

    @AfterAll
    static void stop() {
        POOL.shutdown();
    }

    @Test
    void twinGivesAllPrintedDigits() {
        assertThat(EmTwin.logLikelihood(ROWS, COUNTS, 0, new double[] {1, 1, 1}))
                .isCloseTo(-460.4458930346, within(PRINTED_LOG));
        for (double[] step : STEPS) {
            double[] x = EmTwin.run(ROWS, COUNTS, 0, (int) step[0]);
            assertThat(x).containsExactly(Arrays.copyOfRange(step, 1, 4), within(PRINTED));
            assertThat(EmTwin.logLikelihood(ROWS, COUNTS, 0, x)).isCloseTo(step[4], within(PRINTED_LOG));
        }
        for (double[] step : STEPS_WITH_BACKGROUND) {
            double[] x = EmTwin.run(ROWS, COUNTS, 10, (int) step[0]);
            assertThat(x).containsExactly(Arrays.copyOfRange(step, 1, 4), within(PRINTED));
            assertThat(EmTwin.logLikelihood(ROWS, COUNTS, 10, x)).isCloseTo(step[4], within(PRINTED_LOG));
        }
    }

    @Test
    void engineAgreesInSinglePrecision() throws Exception {
        check(STEPS, EventBackground.NONE, 0);
    }

    @Test
    void engineAgreesWithBackground() throws Exception {
        check(STEPS_WITH_BACKGROUND, event -> 10, 4 * 10);
    }

    private static void check(double[][] steps, EventBackground background, double totalBackground) throws Exception {
        int last = (int) steps[steps.length - 1][0];
        List<Image> images = new ArrayList<>();
        List<PassReport> passes = new ArrayList<>();
        estimator(background, last + 1)
                .run(
                        (pass, image) -> {
                            passes.add(pass);
                            images.add(image.get());
                        },
                        Progress.SILENT);
        for (double[] step : steps) {
            int n = (int) step[0];
            float[] x = images.get(n - 1).values();
            for (int j = 0; j < 3; j++) {
                assertThat(x[j] / step[1 + j]).isCloseTo(1, within(SINGLE));
            }
            // The report of the next pass tells the likelihood of this image.
            assertThat(passes.get(n).logLikelihood() - totalBackground).isCloseTo(step[4], within(SINGLE * step[4]));
        }
    }

    private static Estimator estimator(EventBackground background, int passes) throws Exception {
        MemoryList list = new MemoryList(3, oneVoxelRays(), eventsInMixedOrder());
        Grid grid = new Grid(1, 1, 3, 1, 1, 1, Pose.IDENTITY);
        Image sensitivity = Sensitivity.of(list, grid, POOL, Progress.SILENT);
        Image support = FieldOfView.support(sensitivity, point -> true);
        EventStore store =
                EventLoader.load(list, list, support, EventSelection.ALL, 1, background, POOL, Progress.SILENT);
        return new Estimator(store, sensitivity, EstimationSettings.mlem(passes), POOL);
    }

    /** Each row is a sheaf of three rays, each of which crosses one voxel of 1 mm through its middle. */
    private static double[][] oneVoxelRays() {
        List<double[]> rays = new ArrayList<>();
        for (double[] row : ROWS) {
            for (int j = 0; j < 3; j++) {
                rays.add(new double[] {-2, 0, j - 1, 2, 0, j - 1, row[j]});
            }
        }
        return rays.toArray(double[][]::new);
    }

    private static int[] eventsInMixedOrder() {
        int[] left = COUNTS.clone();
        int[] events = new int[Arrays.stream(COUNTS).sum()];
        int row = 0;
        for (int i = 0; i < events.length; i++) {
            do {
                row = (row + 1) % left.length;
            } while (left[row] == 0);
            left[row]--;
            events[i] = row;
        }
        return events;
    }
}
