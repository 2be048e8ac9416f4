package org.raysheaf.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Random;
import java.util.concurrent.ForkJoinPool;
import java.util.stream.IntStream;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.raysheaf.engine.blur.BlurModel;
import org.raysheaf.engine.blur.Mixture;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.JosephTwin;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.engine.ray.NoUsableEventsException;
import org.raysheaf.geometry.event.EventTally.Reason;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.settings.InvalidSettingsException;

/** The estimator on 100,000 lines through a cylinder, seen by an ideal ring. */
final class EstimatorTest {
    private static final int EVENTS = 100_000;
    private static final Grid GRID = Grid.centred(32, 32, 24, 1.25);
    private static final MemoryList LIST = cylinder(EVENTS, 41);
    private static final Image SENSITIVITY = smoothSensitivity();
    /** Less than the activity fills, so that some lines miss it. */
    private static final Image SUPPORT = FieldOfView.support(SENSITIVITY, FieldOfView.cylinder(14));

    private static final ForkJoinPool POOL = new ForkJoinPool(2);

    /** Σ s·x = events: sums of about 10⁶ single-precision contributions, each good to 6·10⁻⁸. */
    private static final double BALANCE = 1e-6;

    @AfterAll
    static void stop() {
        POOL.shutdown();
    }

    @Test
    void everyUpdateExplainsAllEventsAndTheLikelihoodNeverFalls() throws Exception {
        EventStore store = load(EventSelection.ALL, 1);
        Estimate estimate = run(store, new EstimationSettings(12, 1, 4, 0), POOL);
        assertThat(estimate.tally().read()).isEqualTo(EVENTS);
        assertThat(estimate.tally().used()).isEqualTo(estimate.events());
        assertThat(estimate.tally().setAsideFor(Reason.OUTSIDE_IMAGE)).isBetween(1L, EVENTS / 10L);
        double before = Double.NEGATIVE_INFINITY;
        for (PassReport pass : estimate.passes()) {
            assertThat(pass.expectedEvents() / store.events()).isCloseTo(1, within(BALANCE));
            assertThat(pass.logLikelihood()).isGreaterThan(before);
            before = pass.logLikelihood();
        }
        assertThat(weightedSum(estimate.image())).isCloseTo(store.events(), within(BALANCE * EVENTS));
        assertThat(estimate.passes()).hasSize(12);
    }

    /** With a blur too: what Bᵀ does to both sides keeps them in balance, to the rounding of its sums of a few hundred terms. */
    @Test
    void blurredUpdatesExplainAllEventsAndTheLikelihoodNeverFalls() throws Exception {
        EventStore store = load(EventSelection.ALL, 1);
        BlurModel blur =
                new BlurModel(new Mixture(List.of(new Mixture.Part(0.6, 0.7), new Mixture.Part(0.4, 2))), null);
        Estimate estimate = new Estimator(store, SENSITIVITY, blur, null, new EstimationSettings(12, 1, 4, 0), POOL)
                .run(PassListener.SILENT, Progress.SILENT);
        double before = Double.NEGATIVE_INFINITY;
        for (PassReport pass : estimate.passes()) {
            assertThat(pass.expectedEvents() / store.events()).isCloseTo(1, within(10 * BALANCE));
            assertThat(pass.logLikelihood()).isGreaterThan(before);
            before = pass.logLikelihood();
        }
        double plain = run(store, new EstimationSettings(12, 1, 4, 0), POOL)
                .passes()
                .get(11)
                .logLikelihood();
        assertThat(before).isNotEqualTo(plain);
    }

    @Test
    void orderedSubsetsExplainAllEventsToo() throws Exception {
        EventStore store = load(EventSelection.ALL, 7);
        Estimate estimate = run(store, new EstimationSettings(2, 7, 2, 0), POOL);
        for (PassReport pass : estimate.passes()) {
            assertThat(pass.expectedEvents() / store.events()).isCloseTo(1, within(BALANCE));
        }
        double gain = run(load(EventSelection.ALL, 1), new EstimationSettings(2, 1, 2, 0), POOL)
                .passes()
                .get(1)
                .logLikelihood();
        assertThat(estimate.passes().get(1).logLikelihood()).isGreaterThan(gain);
    }

    @Test
    void resultDoesNotDependOnThreadCount() throws Exception {
        float[] first = null;
        for (int threads : new int[] {1, 2, 3, 2}) {
            ForkJoinPool pool = new ForkJoinPool(threads);
            EventStore store = EventLoader.load(
                    LIST, LIST, SUPPORT, EventSelection.ALL, 2, EventBackground.NONE, pool, Progress.SILENT);
            float[] image =
                    run(store, new EstimationSettings(2, 2, 5, 0), pool).image().values();
            pool.shutdown();
            first = first == null ? image : first;
            assertThat(image).isEqualTo(first);
        }
    }

    /** With one subset, ordered subsets are nothing but MLEM. */
    @ParameterizedTest
    @ValueSource(ints = {1, 3})
    void agreesWithTheTwin(int subsets) throws Exception {
        Grid coarse = Grid.centred(7, 7, 6, 5);
        int events = 301;
        MemoryList list = cylinder(events, 42);
        Image sensitivity = Image.filled(coarse, 2);
        EventStore store = EventLoader.load(
                list,
                list,
                FieldOfView.support(sensitivity, p -> true),
                EventSelection.ALL,
                subsets,
                EventBackground.NONE,
                POOL,
                Progress.SILENT);
        assertThat(store.events()).isEqualTo(events);
        Image image = run(store, sensitivity, new EstimationSettings(2, subsets, 0, 0));
        double[] expected = twin(coarse, lines(events, 42), 2, subsets, 2);
        for (int j = 0; j < expected.length; j++) {
            assertThat((double) image.values()[j]).isCloseTo(expected[j], within(2e-5 * (1 + expected[j])));
        }
    }

    private static Image run(EventStore store, Image sensitivity, EstimationSettings settings) {
        return new Estimator(store, sensitivity, settings, POOL)
                .run(PassListener.SILENT, Progress.SILENT)
                .image();
    }

    /** Subset s holds the lines s, s + S, s + 2 S, … and as large a part of the sensitivity as of the lines. */
    private static double[] twin(Grid grid, double[][] lines, double sensitivity, int subsets, int passes) {
        double[] x = IntStream.range(0, grid.voxels()).mapToDouble(j -> 1).toArray();
        for (int update = 0; update < passes * subsets; update++) {
            double[] sum = new double[x.length];
            int used = 0;
            for (int i = update % subsets; i < lines.length; i += subsets) {
                addRatio(grid, lines[i], x, sum);
                used++;
            }
            for (int j = 0; j < x.length; j++) {
                x[j] *= sum[j] / (sensitivity * used / lines.length);
            }
        }
        return x;
    }

    private static void addRatio(Grid grid, double[] line, double[] x, double[] sum) {
        Vector3 start = new Vector3((float) line[0], (float) line[1], (float) line[2]);
        Vector3 end = new Vector3((float) line[3], (float) line[4], (float) line[5]);
        double[] row = JosephTwin.row(grid, start, end);
        double mean = 0;
        for (int j = 0; j < x.length; j++) {
            mean += row[j] * x[j];
        }
        for (int j = 0; j < x.length; j++) {
            sum[j] += row[j] / mean;
        }
    }

    @Test
    void oddAndEvenEventsMakeTwoHalves() throws Exception {
        EventStore all = load(EventSelection.ALL, 1);
        EventStore odd = load(EventSelection.ODD, 1);
        EventStore even = load(EventSelection.EVEN, 1);
        assertThat(odd.events() + even.events()).isEqualTo(all.events());
        assertThat(odd.events() - even.events()).isBetween(0, 1);
        assertThat(odd.tally().used()).isEqualTo(all.events());
        double sumOdd = run(odd, EstimationSettings.mlem(1), POOL).image().sum();
        double sumEven = run(even, EstimationSettings.mlem(1), POOL).image().sum();
        double sumAll = run(all, EstimationSettings.mlem(1), POOL).image().sum();
        // Each half estimates the same activity; together they hold every event once.
        assertThat((odd.share() * sumOdd + even.share() * sumEven) / sumAll).isCloseTo(1, within(BALANCE));
        assertThat(sumOdd / sumAll).isCloseTo(1, within(0.02));
    }

    @Test
    void fillsOnlyTheSupport() throws Exception {
        Image image = run(load(EventSelection.ALL, 1), EstimationSettings.mlem(2), POOL)
                .image();
        for (int j = 0; j < image.values().length; j++) {
            assertThat(image.values()[j] > 0).isEqualTo(SUPPORT.values()[j] > 0);
        }
    }

    @Test
    void rejectsWhatDoesNotFitTogether() throws Exception {
        EventStore store = load(EventSelection.ALL, 2);
        assertThatThrownBy(() -> run(store, EstimationSettings.mlem(1), POOL))
                .hasMessage("the events were dealt into 2 subsets, the settings ask for 1");
        assertThatThrownBy(() -> new Estimator(store, new Image(GRID), new EstimationSettings(1, 2, 0, 0), POOL))
                .hasMessageContaining("voxels that may hold activity need a finite sensitivity > 0: found 0.0");
        assertThatThrownBy(() -> new Estimator(
                        store, Image.filled(Grid.centred(3, 4, 5, 1), 1), new EstimationSettings(1, 2, 0, 0), POOL))
                .hasMessage("expected an image of 32 x 32 x 24 voxels, found 3 x 4 x 5");
        assertThatThrownBy(() -> load(EventSelection.ALL, EVENTS)).hasMessageContaining("subsets, for");
        assertThatThrownBy(() -> new EstimationSettings(0, 0, -1, Double.NaN))
                .hasMessageContaining("passes: expected a number from 1 to 10000, found 0")
                .hasMessageContaining("subsets")
                .hasMessageContaining("lanes")
                .hasMessageContaining("post_filter_fwhm_mm");
    }

    /** An image from nothing would be 0/0 in every voxel. */
    @Test
    void refusesAListWithoutUsableEventsAndSaysWhatBecameOfThem() {
        assertThatThrownBy(() -> EventLoader.load(
                        LIST,
                        LIST,
                        new Image(GRID),
                        EventSelection.ALL,
                        3,
                        EventBackground.NONE,
                        POOL,
                        Progress.SILENT))
                .isInstanceOfSatisfying(NoUsableEventsException.class, e -> {
                    assertThat(e.tally().used()).isZero();
                    assertThat(e.tally().setAsideFor(Reason.OUTSIDE_IMAGE)).isEqualTo(EVENTS);
                });
    }

    /** What a user's settings can cause must not look like a mistake in the program. */
    @Test
    void tooManySubsetsAndTooFineAGridAreMistakesInSettings() {
        assertThatThrownBy(() -> load(EventSelection.ALL, EVENTS)).isInstanceOf(InvalidSettingsException.class);
        assertThatThrownBy(() -> new Lattice(Grid.centred(40_000, 1, 1, 1)))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("found 40000 x 1 x 1; take larger voxels");
    }

    @Test
    void suitsTheNumberOfLanesToTheProblem() {
        assertThat(List.of(
                        Lanes.suited(0, 1000),
                        Lanes.suited(240_000_000L, 128 * 128 * 192),
                        Lanes.suited(1L << 40, 1000),
                        Lanes.suited(20_000_000L, 128 * 128 * 192),
                        Lanes.suited(1L << 50, 512 * 512 * 512)))
                .containsExactly(1, 16, 16, 1, 2);
    }

    private static EventStore load(EventSelection selection, int subsets) throws Exception {
        return EventLoader.load(LIST, LIST, SUPPORT, selection, subsets, EventBackground.NONE, POOL, Progress.SILENT);
    }

    private static Estimate run(EventStore store, EstimationSettings settings, ForkJoinPool pool) {
        return new Estimator(store, SENSITIVITY, settings, pool).run(PassListener.SILENT, Progress.SILENT);
    }

    private static double weightedSum(Image image) {
        double sum = 0;
        for (int j = 0; j < image.values().length; j++) {
            sum += (double) SENSITIVITY.values()[j] * image.values()[j];
        }
        return sum;
    }

    /** Any positive image will do; this one falls off towards the ends. */
    private static Image smoothSensitivity() {
        Image image = new Image(GRID);
        for (int x = 0; x < GRID.nx(); x++) {
            for (int y = 0; y < GRID.ny(); y++) {
                for (int z = 0; z < GRID.nz(); z++) {
                    image.values()[GRID.index(x, y, z)] = (float) (0.01 * (1 + z) * (GRID.nz() - z));
                }
            }
        }
        return image;
    }

    private static MemoryList cylinder(int events, long seed) {
        return new MemoryList(1, lines(events, seed), IntStream.range(0, events).toArray());
    }

    /** Decays in a cylinder of radius 16 mm and length 30 mm; lines end on a ring of radius 42 mm and length 62 mm. */
    private static double[][] lines(int events, long seed) {
        Random random = new Random(seed);
        double[][] lines = new double[events][];
        int made = 0;
        while (made < events) {
            double r = 16 * Math.sqrt(random.nextDouble());
            double phi = 2 * Math.PI * random.nextDouble();
            double x = r * Math.cos(phi);
            double y = r * Math.sin(phi);
            double z = 30 * (random.nextDouble() - 0.5);
            double psi = 2 * Math.PI * random.nextDouble();
            double slope = 2 * random.nextDouble() - 1;
            double along = x * Math.cos(psi) + y * Math.sin(psi);
            double reach = Math.sqrt(42 * 42 - r * r + along * along);
            double back = -along - reach;
            double ahead = -along + reach;
            if (Math.abs(z + back * slope) < 31 && Math.abs(z + ahead * slope) < 31) {
                lines[made++] = new double[] {
                    x + back * Math.cos(psi),
                    y + back * Math.sin(psi),
                    z + back * slope,
                    x + ahead * Math.cos(psi),
                    y + ahead * Math.sin(psi),
                    z + ahead * slope,
                    1
                };
            }
        }
        return lines;
    }
}
