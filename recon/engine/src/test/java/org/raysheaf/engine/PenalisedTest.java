package org.raysheaf.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.TreeMap;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.raysheaf.engine.EstimationSettings.Method;
import org.raysheaf.engine.prior.EdgePreservingPrior;
import org.raysheaf.engine.prior.PairPotential;
import org.raysheaf.engine.prior.Prior;
import org.raysheaf.engine.prior.QuadraticPrior;
import org.raysheaf.engine.prior.RelativeDifferencePrior;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Checkpoints;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.port.Snapshot;

/** Methods with a prior against the conditions that the most likely image must fulfil, worked out densely in double precision. */
final class PenalisedTest {
    private static final int EVENTS = 3000;
    private static final TinyScan SCAN = new TinyScan(EVENTS, 8);
    private static final Grid GRID = TinyScan.GRID;
    private static final ForkJoinPool POOL = new ForkJoinPool(2);

    /** Bar of the issue: all methods end within this part of the objective's range. */
    private static final double SAME_END = 1e-4;

    /** Slopes that are left, in parts of s: faint voxels of a flat direction are still on their way to 0. */
    private static final double REST = 3e-3;

    /** Steps that shrink leave more: 1/200 of a full step in the last pass. */
    private static final double RELAXED_REST = 3e-2;

    @AfterAll
    static void stop() {
        POOL.shutdown();
    }

    static Stream<Prior> priors() {
        return Stream.of(
                new QuadraticPrior(0.05), new RelativeDifferencePrior(0.05, 2), new EdgePreservingPrior(0.05, 0.5));
    }

    @ParameterizedTest
    @MethodSource("priors")
    void allMethodsEndWhereTheConditionsOfTheMaximumHold(Prior prior) throws Exception {
        Dense dense = new Dense(prior);
        double[] uniform = new double[GRID.voxels()];
        Arrays.fill(uniform, dense.typical);
        double low = dense.objective(uniform);
        double[] reduced = doubles(run(settings(150, 6, Method.VARIANCE_REDUCED, prior)));
        double[] relaxed = doubles(
                run(new EstimationSettings(500, 6, 3, 0, Method.BSREM, prior, new Relaxation(1, 0.4), null, null)));
        double[] alone = doubles(
                run(new EstimationSettings(1000, 1, 3, 0, Method.BSREM, prior, new Relaxation(1, 0.002), null, null)));
        double top = dense.objective(reduced);
        assertThat((top - dense.objective(relaxed)) / (top - low)).isBetween(-SAME_END, SAME_END);
        assertThat((top - dense.objective(alone)) / (top - low)).isBetween(-SAME_END, SAME_END);
        dense.requireConditions(reduced, REST);
        dense.requireConditions(relaxed, RELAXED_REST);
        // The conditions are not fulfilled by just any image.
        double[] early = doubles(run(settings(2, 6, Method.VARIANCE_REDUCED, prior)));
        assertThatThrownBy(() -> dense.requireConditions(early, RELAXED_REST)).isInstanceOf(AssertionError.class);
    }

    /** Φ and its gradient as on paper. */
    private static final class Dense {
        final double[][] rows = SCAN.matrix();
        final double typical;
        private final PairPotential pair;
        private final double beta;

        Dense(Prior prior) {
            double sensitivity = SCAN.sensitivity.sum();
            typical = EVENTS / sensitivity;
            pair = prior.potential(typical);
            beta = prior.strength() * sensitivity / GRID.voxels();
        }

        double objective(double[] x) {
            double sum = 0;
            for (double[] row : rows) {
                sum += Math.log(mean(row, x));
            }
            for (int j = 0; j < x.length; j++) {
                sum -= SCAN.sensitivity.values()[j] * x[j];
                for (int k = 0; k < x.length; k++) {
                    sum -= 0.5 * beta * weight(j, k) * pair.value(x[j], x[k]);
                }
            }
            return sum;
        }

        /** Karush–Kuhn–Tucker: no slope where x is above 0, none upwards where it is 0; slopes in parts of s, x in parts of x̄. */
        void requireConditions(double[] x, double tolerance) {
            double[] gradient = new double[x.length];
            for (double[] row : rows) {
                double mean = mean(row, x);
                for (int j = 0; j < x.length; j++) {
                    gradient[j] += row[j] / mean;
                }
            }
            for (int j = 0; j < x.length; j++) {
                double s = SCAN.sensitivity.values()[j];
                gradient[j] -= s;
                for (int k = 0; k < x.length; k++) {
                    gradient[j] -= beta * weight(j, k) * pair.slope(x[j], x[k]);
                }
                // How far a voxel would still go: upwards freely, downwards as far as there is something left.
                double rise = gradient[j] / s;
                double residual = rise > 0 ? rise : Math.min(-rise, x[j] / typical);
                assertThat(residual).isLessThan(tolerance);
            }
        }

        private static double mean(double[] row, double[] x) {
            double mean = TinyScan.BACKGROUND;
            for (int j = 0; j < x.length; j++) {
                mean += row[j] * x[j];
            }
            return mean;
        }

        /** 1 over the distance in voxels, for the 26 neighbours. */
        private static double weight(int j, int k) {
            int perX = GRID.ny() * GRID.nz();
            int dx = Math.abs(j / perX - k / perX);
            int dy = Math.abs(j / GRID.nz() % GRID.ny() - k / GRID.nz() % GRID.ny());
            int dz = Math.abs(j % GRID.nz() - k % GRID.nz());
            return j == k || Math.max(dx, Math.max(dy, dz)) > 1 ? 0 : 1 / Math.sqrt(dx * dx + dy * dy + dz * dz);
        }
    }

    /** The same strength does the same at twice the exposure, and at twice the activity. */
    @Test
    void strengthMeansTheSameAtAnyCountLevel() throws Exception {
        EstimationSettings settings = settings(60, 6, Method.VARIANCE_REDUCED, new RelativeDifferencePrior(0.1, 2));
        Image once = run(settings);
        Image doubled = SCAN.sensitivity.copy();
        for (int j = 0; j < doubled.values().length; j++) {
            doubled.values()[j] *= 2;
        }
        // Twice the sensitivity for as many events: half the activity. Without background that is all; here it weighs a
        // little more.
        Image half = new Estimator(SCAN.store(6, POOL), doubled, settings, POOL)
                .run(PassListener.SILENT, Progress.SILENT)
                .image();
        double squares = 0;
        double all = 0;
        for (int j = 0; j < half.values().length; j++) {
            squares += Math.pow(2 * half.values()[j] - once.values()[j], 2);
            all += Math.pow(once.values()[j], 2);
        }
        assertThat(Math.sqrt(squares / all)).isLessThan(0.05);
    }

    @Test
    void resumedAfterAnyPassOnAnyThreadsEveryMethodEndsInTheSameBits() throws Exception {
        Prior prior = new RelativeDifferencePrior(0.05, 2);
        Stop heldOut = new HeldOutStop(4, 100);
        for (EstimationSettings settings : List.of(
                with(settings(8, 3, Method.EM, null), null),
                with(settings(8, 3, Method.EM, null), heldOut),
                with(settings(8, 3, Method.BSREM, prior), heldOut),
                with(settings(8, 3, Method.VARIANCE_REDUCED, prior), heldOut))) {
            Memory whole = new Memory(99);
            Estimate expected = run(settings, whole, 1);
            for (int broken = 1; broken < 8; broken++) {
                Memory memory = new Memory(broken);
                try {
                    run(settings, memory, 2);
                } catch (IllegalStateException stopped) {
                    assertThat(stopped).hasMessage("stopped");
                }
                memory.room = 99;
                Estimate resumed = run(settings, memory, 3);
                assertThat(resumed.image().values()).isEqualTo(expected.image().values());
                assertThat(resumed.kept()).isEqualTo(expected.kept());
                assertThat(resumed.passes().get(7).objective())
                        .isEqualTo(expected.passes().get(7).objective());
            }
        }
    }

    @Test
    void theImageThatExplainsHeldOutEventsBestIsKept() throws Exception {
        EstimationSettings settings = with(settings(60, 2, Method.EM, null), new HeldOutStop(5, 3));
        List<Image> images = new ArrayList<>();
        EventStore store = SCAN.store(settings.parts(), POOL);
        Estimate estimate = new Estimator(store, SCAN.sensitivity, settings, POOL)
                .run((pass, image) -> images.add(image.get()), Progress.SILENT);
        int made = estimate.passes().size();
        assertThat(made).isLessThan(60);
        assertThat(estimate.kept()).isEqualTo(made - 3);
        assertThat(estimate.image().values())
                .isEqualTo(images.get(estimate.kept() - 1).values());
        assertThat(estimate.reason())
                .isEqualTo("pass " + (made - 3)
                        + " explains the held-out events best; 3 passes after it did not do better");
        // Every fifth event, with a fifth of the sensitivity; the image stands for all of the activity.
        double[][] rows = SCAN.matrix();
        double[] x = doubles(images.get(0));
        double sum = 0;
        for (int i = 4; i < rows.length; i += 5) {
            sum += Math.log(Dense.mean(rows[i], x));
        }
        double expected = 0;
        for (int j = 0; j < x.length; j++) {
            expected += SCAN.sensitivity.values()[j] * x[j];
        }
        assertThat(estimate.passes().get(0).heldOut()).isCloseTo(sum - 0.2 * expected, within(1e-3));
        Image all = run(settings(1, 2, Method.EM, null));
        assertThat(images.get(0).sum() / all.sum()).isCloseTo(1, within(0.03));
    }

    /** Were held-out events not left out of the updates, more passes would always explain them better. */
    @Test
    void everySubsetGetsEventsWhateverIsHeldOut() {
        for (int every : new int[] {2, 3, 10}) {
            for (int subsets : new int[] {1, 2, 9, 10, 24}) {
                int parts = with(settings(1, subsets, Method.EM, null), new HeldOutStop(every, 1))
                        .parts();
                assertThat(parts % every).isZero();
                assertThat(parts - parts / every).isGreaterThanOrEqualTo(subsets);
            }
        }
    }

    @Test
    void stopsWhenTheObjectiveHardlyChanges() throws Exception {
        ChangeStop stop = new ChangeStop(0.01);
        Estimate estimate = run(with(settings(100, 1, Method.EM, null), stop), new Memory(99), 2);
        List<PassReport> passes = estimate.passes();
        int last = passes.size() - 1;
        double first = passes.get(0).objective();
        assertThat(last).isBetween(3, 98);
        assertThat(passes.get(last).objective() - passes.get(last - 1).objective())
                .isLessThanOrEqualTo(0.01 * (passes.get(last).objective() - first));
        assertThat(passes.get(last - 1).objective() - passes.get(last - 2).objective())
                .isGreaterThan(0.01 * (passes.get(last - 1).objective() - first));
        assertThat(estimate.reason()).startsWith("the objective changed by");
        assertThat(estimate.kept()).isEqualTo(last + 1);
    }

    @Test
    void startsFromAnImageAndRisesFromThere() throws Exception {
        Image before = run(settings(10, 1, Method.EM, null));
        EstimationSettings one = settings(1, 1, Method.EM, null);
        Image next = new Estimator(SCAN.store(1, POOL), SCAN.sensitivity, null, before, one, POOL)
                .run(PassListener.SILENT, Progress.SILENT)
                .image();
        Image eleven = run(settings(11, 1, Method.EM, null));
        double faint = 0.01 * EVENTS / SCAN.sensitivity.sum();
        for (int j = 0; j < next.values().length; j++) {
            if (before.values()[j] > 10 * faint) {
                assertThat(next.values()[j] / (double) eleven.values()[j]).isCloseTo(1, within(0.02));
            }
            assertThat(next.values()[j]).isPositive();
        }
    }

    @Test
    void saysWhatDoesNotGoTogether() {
        assertThatThrownBy(() -> settings(1, 2, Method.EM, new QuadraticPrior(1)))
                .hasMessageContaining("method: expected variance_reduced or bsrem, since there is a prior, found em");
        assertThatThrownBy(() -> settings(1, 1, Method.VARIANCE_REDUCED, null))
                .hasMessageContaining("prior: expected a prior")
                .hasMessageContaining("subsets: expected at least 2 subsets");
        assertThatThrownBy(() -> new EstimationSettings(1, 1, 0, 0, Method.EM, null, new Relaxation(1, 1), null, null))
                .hasMessageContaining("relaxation: expected only with method: bsrem");
        assertThatThrownBy(() -> new Relaxation(0, Double.NaN))
                .hasMessageContaining("first")
                .hasMessageContaining("decline");
        assertThatThrownBy(() -> new ChangeStop(Double.NaN)).hasMessageContaining("below");
        assertThatThrownBy(() -> new HeldOutStop(1, 0))
                .hasMessageContaining("every")
                .hasMessageContaining("patience");
        assertThatThrownBy(() -> new StartSettings(null, null)).hasMessageContaining("found neither");
        assertThatThrownBy(() -> new StartSettings("a.nii.gz", 3)).hasMessageContaining("found both");
    }

    @Test
    void amountsAndDensitiesSurviveTheWayToAnotherGrid() {
        Grid fine = new Grid(5, 4, 7, 1, 2, 0.5, TinyScan.GRID.pose());
        Grid coarse = OtherGrid.doubled(fine);
        assertThat(List.of(coarse.nx(), coarse.ny(), coarse.nz())).containsExactly(3, 2, 4);
        // Voxel 0 of the coarse grid holds voxels 0 and 1 of the fine one.
        Vector3 between = fine.centre(0.5, 0.5, 0.5);
        assertThat(coarse.centre(0, 0, 0).minus(between).norm()).isLessThan(1e-12);
        Image linear = new Image(fine);
        for (int x = 0; x < 5; x++) {
            for (int y = 0; y < 4; y++) {
                for (int z = 0; z < 7; z++) {
                    Vector3 c = fine.centre(x, y, z);
                    linear.values()[fine.index(x, y, z)] = (float) (10 + c.x() - 0.5 * c.y() + 2 * c.z());
                }
            }
        }
        assertThat(OtherGrid.summed(linear).sum()).isCloseTo(linear.sum(), within(1e-4));
        assertThat(OtherGrid.interpolated(linear, fine).values()).containsExactly(linear.values(), within(1e-5f));
        Vector3 inner = coarse.centre(1, 0, 1);
        assertThat((double) OtherGrid.interpolated(linear, coarse).at(1, 0, 1))
                .isCloseTo(10 + inner.x() - 0.5 * inner.y() + 2 * inner.z(), within(1e-5));
        assertThat(OtherGrid.interpolated(linear, Grid.centred(3, 3, 3, 50)).at(0, 1, 1))
                .isZero();
    }

    private static EstimationSettings settings(int passes, int subsets, Method method, @Nullable Prior prior) {
        return new EstimationSettings(passes, subsets, 3, 0, method, prior, null, null, null);
    }

    private static EstimationSettings with(EstimationSettings s, @Nullable Stop stop) {
        return new EstimationSettings(s.passes(), s.subsets(), 3, 0, s.method(), s.prior(), null, stop, null);
    }

    private static Image run(EstimationSettings settings) throws Exception {
        return run(settings, new Memory(Integer.MAX_VALUE), 2).image();
    }

    private static Estimate run(EstimationSettings settings, Checkpoints checkpoints, int threads) throws Exception {
        ForkJoinPool pool = new ForkJoinPool(threads);
        try {
            return new Estimator(SCAN.store(settings.parts(), pool), SCAN.sensitivity, settings, pool)
                    .run(PassListener.SILENT, Progress.SILENT, checkpoints);
        } finally {
            pool.shutdown();
        }
    }

    private static double[] doubles(Image image) {
        double[] values = new double[image.values().length];
        for (int j = 0; j < values.length; j++) {
            values[j] = image.values()[j];
        }
        return values;
    }

    /** Keeps copies, as a file would, and breaks off after so many. */
    private static final class Memory implements Checkpoints {
        int room;
        private @Nullable Snapshot last;

        Memory(int room) {
            this.room = room;
        }

        @Override
        public Optional<Snapshot> latest() {
            return Optional.ofNullable(last);
        }

        @Override
        public void save(Snapshot snapshot) {
            Snapshot copy = new Snapshot();
            for (Map.Entry<String, float[]> entry : new TreeMap<>(snapshot.images()).entrySet()) {
                copy.put(entry.getKey(), entry.getValue().clone());
            }
            for (Map.Entry<String, double[]> entry : new TreeMap<>(snapshot.figures()).entrySet()) {
                copy.put(entry.getKey(), entry.getValue().clone());
            }
            last = copy;
            if (--room == 0) {
                throw new IllegalStateException("stopped");
            }
        }
    }
}
