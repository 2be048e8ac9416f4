package org.raysheaf.engine.correct;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import java.util.SplittableRandom;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.event.PairingTally;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.Source;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.BlockPairKinds;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.response.FlightTimes;
import org.raysheaf.geometry.response.LineOfResponse;
import org.raysheaf.geometry.response.PairFactor;
import org.raysheaf.geometry.response.PairLines;

class CorrectionsOfARingTest {
    private static final ForkJoinPool POOL = ForkJoinPool.commonPool();

    /** The middle crystals of blocks 0 and 4, which face each other along x. */
    private static final int HERE = 12;

    private static final int THERE = 4 * 25 + 12;

    private static LineOfResponse line(int a, int b) {
        LineOfResponse line = new LineOfResponse();
        new PairLines(Ring.FACES).lineAnywhere(a, b, line);
        return line;
    }

    @Test
    void attenuationIsThatOfTheWholeChord() {
        Attenuation attenuation = new Attenuation(PhantomMaps.attenuation(Ring.water(12.5, 40, 0), 0.5));
        PairFactor factor = attenuation.make();
        // reference-values C without coherent scatter: 0.09577 /cm; the chord through the axis is 25 mm. Voxels of 0.5
        // mm blur its ends.
        assertThat(factor.of(HERE, THERE, line(HERE, THERE))).isCloseTo(Math.exp(-0.9577 * 0.25), within(0.003));
        // a line past the cylinder: crystals at the edges of neighbouring quadrants
        assertThat(factor.of(0, 2 * 25, line(0, 2 * 25))).isCloseTo(1, within(1e-6));
        Image wrong = PhantomMaps.attenuation(Ring.water(5, 5, 0), 1).copy();
        wrong.values()[3] = -1;
        assertThatThrownBy(() -> new Attenuation(wrong)).hasMessageContaining("at least 0: -1");
    }

    @Test
    void activityMapsHoldTheActivityOfSolidsAndSources() {
        Source line = new Source.Line("line", new Vector3(0, 0, -10), new Vector3(0, 0, 10), 5);
        Phantom both = new Phantom(new PhantomDescription(
                "both", List.of(), null, Ring.water(10, 20, 3).parts(), List.of(line)));
        Image map = PhantomMaps.activity(both, 0.5);
        double total = map.sum() * map.grid().voxelVolumeMm3() / 1000;
        // edges of the cylinder are caught by 27 points in each voxel
        assertThat(total).isCloseTo(both.activityBq().value(), within(0.005 * total));
    }

    /** Rates that differ by a factor of four come back from delayed pairs; the total exactly. */
    @Test
    void randomsComeBackFromDelayedPairs() throws IOException {
        SplittableRandom random = new SplittableRandom(3);
        int n = Ring.SYSTEM.elements();
        double[] rates = new double[n];
        for (int e = 0; e < n; e++) {
            rates[e] = 0.8 + 2.4 * random.nextDouble();
        }
        Ring.Pairs list = new Ring.Pairs(null);
        long delayed = 0;
        for (int a = 0; a < n; a++) {
            for (int b = 0; b < a; b++) {
                for (int k = Ring.SYSTEM.admits(a, b) ? poisson(rates[a] * rates[b], random) : 0; k > 0; k--) {
                    list.add(a, b, true);
                    delayed++;
                }
            }
        }
        Randoms found = Randoms.fromDelayed(list, Ring.SYSTEM);
        assertThat(found.total()).isCloseTo((double) delayed, within(1e-6 * delayed));
        assertThat(found.relativeError()).isCloseTo(1 / Math.sqrt((double) delayed), within(1e-12));
        double chi = 0;
        double pull = 0;
        for (int a = 0; a < n; a++) {
            int b = (a + n / 2) % n;
            double off = found.of(a, b) / (rates[a] * rates[b]) - 1;
            // each rate comes from the 125 partners of its element, of mean rate 2: some 500 pairs
            double error = Math.sqrt(1 / (250 * rates[a]) + 1 / (250 * rates[b]));
            pull += off / n;
            chi += off * off / (error * error) / n;
        }
        assertThat(pull).isCloseTo(0, within(0.02));
        assertThat(chi).isBetween(0.6, 1.5);
    }

    private static int poisson(double mean, SplittableRandom random) {
        double limit = Math.exp(-mean);
        int count = 0;
        for (double product = random.nextDouble(); product > limit; product *= random.nextDouble()) {
            count++;
        }
        return count;
    }

    private static PairingRecord pairing(Pairing.Crowds crowds, long alone, long paired, List<Long> singles) {
        return new PairingRecord(
                new Pairing(5, 0, null, 100.0, crowds, 0),
                new PairingTally(0, alone, 0, 0, paired, paired / 2, 0),
                singles);
    }

    /** A fifth of the decays that gave any photon gave two: 800 alone, 400 in pairs, q = 0.2. Each ratio by counting by hand. */
    @ParameterizedTest
    @CsvSource({"DISCARD, 0.666667", "EVERY_PAIR, 1", "FIRST_TWO, 0.666667", "STRONGEST_TWO, 0.733333"})
    void promptsAreFewerThanDelayedPairsWhereCrowdsAreSpoilt(Pairing.Crowds crowds, double expected) {
        PairingRecord pairing = pairing(crowds, 800, 400, List.of());
        assertThat(Randoms.promptShare(pairing)).isCloseTo(expected, within(1e-5));
        assertThat(Randoms.promptShare(null)).isEqualTo(1);
        // 1000 decays in 100 s with windows of 5 ns, twice
        double spoilt = crowds == Pairing.Crowds.DISCARD ? Math.exp(-2 * 5e-9 * 1000 / 100) : 1;
        assertThat(Randoms.survival(pairing, 100)).isCloseTo(spoilt, within(1e-15));
    }

    @Test
    void randomsFollowFromSingles() throws IOException {
        int n = Ring.SYSTEM.elements();
        List<Long> singles = new ArrayList<>();
        for (int e = 0; e < n; e++) {
            singles.add(50_000L);
        }
        Ring.Pairs list = new Ring.Pairs(pairing(Pairing.Crowds.EVERY_PAIR, 10_000_000, 0, singles));
        Randoms found = Randoms.fromSingles(list, Ring.SYSTEM);
        // reference-values G6: 2 τ S² for each of the pairs that may pair, for 100 s; 500 singles per second and
        // element
        assertThat(found.of(HERE, THERE)).isCloseTo(2 * 5e-9 * 500 * 500 * 100, within(1e-9));
        assertThat(found.total()).isCloseTo(200 * 125 / 2.0 * 0.25, within(1e-6));
        assertThatThrownBy(() -> Randoms.fromSingles(new Ring.Pairs(null), Ring.SYSTEM))
                .hasMessageContaining("does not tell the singles");
    }

    @Test
    void pileUpFollowsFromTheRate() {
        int n = Ring.SYSTEM.elements();
        List<Long> singles = new ArrayList<>();
        for (int e = 0; e < n; e++) {
            singles.add(4_000_000L);
        }
        Ring.Pairs list = new Ring.Pairs(null);
        PairingRecord pairing = pairing(Pairing.Crowds.DISCARD, 4_000_000L * n, 0, singles);
        // 25 · 4e6 singles in 100 s, live 0.9 of the time (√0.81): 1.11e6 per second, times 100 ns; half stay in the
        // window
        double another = 1 - Math.exp(-25 * 4e6 / 100 / 0.9 * 100e-9);
        double photon = 1 - another * 0.5;
        assertThat(PileUp.pairShare(Ring.SYSTEM, list.header(), pairing, 0.5))
                .isCloseTo(photon * photon, within(1e-12));
    }

    /** What must hold of any single-scatter estimate; its size is proved against full-physics lists elsewhere. */
    @Test
    void scatterIsSymmetricLinearAndFallsWithTheAngle() {
        Phantom rod = Ring.water(5, 20, 100);
        Image mu = PhantomMaps.attenuation(rod, 1);
        Image activity = PhantomMaps.activity(rod, 1);
        Scatter scatter = Scatter.of(Ring.FACES, Ring.window(), activity, mu, 200, POOL);
        assertThat(scatter.perEtendue(HERE, THERE))
                .isEqualTo(scatter.perEtendue(THERE, HERE))
                .isPositive();
        // blocks 0 and 3 stand at 135 degrees, so a photon turns by at least 45: it keeps 395 keV, of which less than
        // half pass the window
        int beside = 3 * 25 + 12;
        assertThat(scatter.perEtendue(HERE, beside)).isBetween(0.0, 0.6 * scatter.perEtendue(HERE, THERE));
        assertThat(scatter.scaled(3).perEtendue(HERE, THERE))
                .isCloseTo(3 * scatter.perEtendue(HERE, THERE), within(1e-6 * scatter.perEtendue(HERE, THERE)));
        Image twice = activity.copy();
        for (int j = 0; j < twice.values().length; j++) {
            twice.values()[j] *= 2;
        }
        assertThat(Scatter.of(Ring.FACES, Ring.window(), twice, mu, 200, POOL).perEtendue(HERE, THERE))
                .isCloseTo(2 * scatter.perEtendue(HERE, THERE), within(1e-5 * scatter.perEtendue(HERE, THERE)));
        // about straight on: µ·(length of the rod across) of photons scatter, a share of which turns little; trues are
        // ∫ activity dl / 2π
        double trues = 100_000 * 10 / (2 * Math.PI);
        assertThat(scatter.perEtendue(HERE, THERE) / trues).isBetween(0.001, 0.05);
    }

    /** By offset, scatter adds up to what it is without times, looks alike from both ends, and lies where the activity is. */
    @Test
    void scatterByOffsetAddsUpToThePlainOne() {
        Phantom water = Ring.water(12, 20, 0);
        Phantom rod = new Phantom(new PhantomDescription(
                "rod",
                List.of(),
                null,
                List.of(),
                List.of(new Source.Line("rod", new Vector3(8, 0, -10), new Vector3(8, 0, 10), 5))));
        FlightTimes times = Objects.requireNonNull(FlightTimes.of(Ring.SYSTEM));
        Image mu = PhantomMaps.attenuation(water, 1);
        Image activity = PhantomMaps.activity(rod, 1);
        Scatter plain = Scatter.of(Ring.FACES, Ring.window(), activity, mu, 200, POOL);
        Scatter scatter = Scatter.of(Ring.FACES, Ring.window(), activity, mu, 200, times, POOL);
        for (int there : new int[] {THERE, 3 * 25 + 2, 5 * 25 + 17}) {
            assertThat(scatter.perEtendue(HERE, there)).isEqualTo(plain.perEtendue(HERE, there));
            double sum = 0;
            double moment = 0;
            double stepMm = 0.5;
            for (double x = -150; x <= 150; x += stepMm) {
                double value = scatter.perEtendueMm(HERE, there, x);
                assertThat(scatter.perEtendueMm(there, HERE, -x)).isCloseTo(value, within(1e-6 * (value + 1e-9)));
                sum += value * stepMm;
                moment += value * stepMm * x;
            }
            // the rectangle rule on straight pieces that are no whole number of steps
            assertThat(sum).isCloseTo(plain.perEtendue(HERE, there), within(1e-3 * sum));
            if (there == THERE) {
                // Block 0 is at +x, 8 mm nearer to the rod. Photons that turn little have come straight from the rod,
                // 8 mm from the middle of the line; the others have gone a few mm further.
                assertThat(moment / sum).isCloseTo(8, within(2.0));
            }
        }
        assertThat(scatter.scaled(2).perEtendueMm(HERE, THERE, 5))
                .isCloseTo(2 * scatter.perEtendueMm(HERE, THERE, 5), within(1e-9));
        assertThatThrownBy(() -> plain.perEtendueMm(HERE, THERE, 0)).hasMessageContaining("without times");
    }

    @Test
    void backgroundsComeInTheUnitOfTheRaySum() throws IOException {
        Phantom water = Ring.water(10, 20, 100);
        Attenuation attenuation = new Attenuation(PhantomMaps.attenuation(water, 1));
        CoincidenceSheaves sheaves = new CoincidenceSheaves(Ring.FACES).with(attenuation);
        Ring.Pairs list = new Ring.Pairs(null);
        for (int i = 0; i < 500; i++) {
            list.add(HERE, THERE, i % 5 == 0);
        }
        Randoms randoms = Randoms.fromDelayed(list, Ring.SYSTEM);
        Scatter scatter =
                Scatter.of(Ring.FACES, Ring.window(), PhantomMaps.activity(water, 1), attenuation.muPerMm(), 100, POOL);
        double perUnit = 2e-3;
        EventBackground background = new Backgrounds(sheaves, randoms, scatter, attenuation, perUnit).of(list, POOL);
        LineOfResponse line = line(HERE, THERE);
        double through = attenuation.make().of(HERE, THERE, line);
        double c = line.etendueMm2Sr() / (2 * Math.PI) * through * perUnit;
        double expected = randoms.of(HERE, THERE) / c + 2 * Math.PI * scatter.perEtendue(HERE, THERE) / through;
        assertThat((double) background.of(0)).isCloseTo(expected, within(1e-5 * expected));
        assertThat((double) background.of(399)).isEqualTo(background.of(0)); // 400 prompts are used

        Backgrounds.Balance balance =
                new Backgrounds(sheaves, randoms, scatter, attenuation, perUnit).balance(list, POOL);
        assertThat(balance.prompts()).isEqualTo(400);
        assertThat(balance.promptsClear()).isZero();
        // all pairs that may pair hold 100 randoms; those whose lines cross the field of view hold fewer
        assertThat(balance.randoms()).isBetween(30.0, 100.0);
        assertThat(balance.attenuationLow()).isBetween(0.7, 0.9);
        assertThat(new Backgrounds(sheaves, null, null, null, perUnit).of(list, POOL))
                .isSameAs(EventBackground.NONE);
    }

    @Test
    void theScaleOfScatterFollowsTheEventsThatAreClearOfTheObject() {
        // 10,000 events, 2000 randoms, 4000 scattered expected: twice as much; randoms are known to 2 %, which is
        // nothing here
        double sure = new Backgrounds.Balance(1e5, 10_000, 1e4, 2000, 1e4, 4000, 1, 1).scatterScale();
        assertThat(sure).isBetween(1.85, 2.0);
        // 100,000 randoms, 1000 scattered: their 2 % are twice the scatter, so what is known beforehand holds
        double unsure = new Backgrounds.Balance(1e6, 103_000, 1e6, 100_000, 1e4, 1000, 1, 1).scatterScale();
        assertThat(unsure).isBetween(1.0, 1.2);
    }

    @Test
    void efficienciesComeBackAndDeadElementsAreFound() throws IOException {
        Phantom source = Ring.water(18, 28, 500);
        Image activity = PhantomMaps.activity(source, 1);
        CoincidenceSheaves sheaves = new CoincidenceSheaves(Ring.FACES);
        int n = Ring.SYSTEM.elements();
        SplittableRandom random = new SplittableRandom(4);
        double[] truth = new double[n];
        for (int e = 0; e < n; e++) {
            truth[e] = e == 7 || e == 133 ? 0 : 0.7 + 0.6 * random.nextDouble();
        }
        RaySums sums = new RaySums(activity);
        double perUnit = 2e-3;
        Ring.Pairs list = new Ring.Pairs(null);
        for (int part = 0; part < sheaves.parts(); part++) {
            sheaves.visit(part, (a, b, line) -> {
                double mean = truth[a] * truth[b] * perUnit * line.etendueMm2Sr() / (2 * Math.PI) * sums.along(line);
                for (int k = poisson(mean, random); k > 0; k--) {
                    list.add(a, b, false);
                }
            });
        }
        Efficiencies found = Efficiencies.of(list, sheaves, activity, null, null, null, perUnit, POOL, Progress.SILENT);
        assertThat(found.silent()).containsExactly(7, 133);
        assertThat(found.goodness().get(0).withGeometry()).isBetween(0.3, 1.8); // 20 pairs of blocks
        double chi = 0;
        for (int e = 0; e < n; e++) {
            if (truth[e] > 0) {
                double pull = (found.efficiencies()[e] / truth[e] - 1) / found.relativeErrors()[e];
                chi += pull * pull / (n - 2);
            }
        }
        assertThat(chi).isBetween(0.7, 1.3); // 198 elements: ± 0.1
    }

    /** In a ring all blocks are alike, and pairs are of a kind if they are as many places apart, either way round. */
    @Test
    void pairsOfBlocksAreSortedByHowTheyStand() {
        BlockPairKinds kinds = new BlockPairKinds(Ring.SYSTEM);
        assertThat(kinds.blockKinds()).isEqualTo(1);
        assertThat(kinds.kinds()).isEqualTo(3); // 2, 3 and 4 of 8 places apart
        assertThat(kinds.kindOf(0, 2)).isEqualTo(kinds.kindOf(7, 1)).isEqualTo(kinds.kindOf(6, 0));
        assertThat(kinds.kindOf(0, 1)).isEqualTo(-1);
        // Column 4 of block 0 is as near to block 2 as its column 0 is to block 6; towards block 4 they are the same.
        int left = 0;
        int right = 4;
        assertThat(kinds.column(left, 2)).isEqualTo(kinds.column(right, 6)).isNotEqualTo(kinds.column(right, 2));
        assertThat(kinds.column(left, 4)).isEqualTo(kinds.column(right, 4));
    }

    /**
     * Factors of pairs of blocks and of columns come back beside efficiencies, and what columns have in common towards all partners goes to the
     * efficiencies.
     */
    @Test
    void blockGeometryComesBackBesideEfficiencies() throws IOException {
        Image activity = PhantomMaps.activity(Ring.water(24, 28, 500), 1);
        CoincidenceSheaves sheaves = new CoincidenceSheaves(Ring.FACES);
        BlockPairKinds kinds = new BlockPairKinds(Ring.SYSTEM);
        int n = Ring.SYSTEM.elements();
        SplittableRandom random = new SplittableRandom(8);
        double[] truth = new double[n];
        for (int e = 0; e < n; e++) {
            truth[e] = 0.7 + 0.6 * random.nextDouble();
        }
        int beside = kinds.kindOf(0, 3);
        int side = kinds.endOf(0, 3);
        RaySums sums = new RaySums(activity);
        double perUnit = 5e-4; // some tens of pairs for each two elements, all of which cross the source
        Ring.Pairs list = new Ring.Pairs(null);
        for (int part = 0; part < sheaves.parts(); part++) {
            int[] blocks = sheaves.blocksOf(part);
            boolean near = kinds.kindOf(blocks[0], blocks[1]) == beside;
            sheaves.visit(part, (a, b, line) -> {
                double g = near ? 1.2 : 1;
                for (int end = 0; near && end < 2; end++) {
                    g *= kinds.column(end == 0 ? a : b, blocks[1 - end]) == 0 ? 0.8 : 1;
                }
                double mean = g * truth[a] * truth[b] * perUnit * line.etendueMm2Sr() / (2 * Math.PI);
                for (int k = poisson(mean * sums.along(line), random); k > 0; k--) {
                    list.add(a, b, false);
                }
            });
        }

        Efficiencies found = Efficiencies.of(list, sheaves, activity, null, null, null, perUnit, POOL, Progress.SILENT);

        GeometryFactors geometry = found.geometry();
        double[] column = geometry.column();
        int at = side * kinds.columns();
        // Columns 0 and 4 mirror each other, so only their ratio to each other is geometry. Some 20,000 pairs each: 1
        // %, and their ratio 1.4 %.
        assertThat(column[at] / column[at + 4]).isCloseTo(0.8, within(0.05));
        assertThat(geometry.of(HERE, 3 * 25 + 12) / geometry.of(HERE, THERE)).isBetween(1.05, 1.35);
        assertThat(found.goodness().get(0).withGeometry()).isBetween(0.3, 1.8);
        assertThat(found.goodness().get(1).withGeometry()).isBetween(0.7, 1.3);
        assertThat(found.goodness().get(1).efficienciesAlone()).isGreaterThan(1.5);
        // The product is what counts: pairs of some elements as they were made.
        double[] e = found.efficiencies();
        for (int partner : new int[] {3 * 25 + 12, THERE}) {
            double product = e[HERE] * e[partner] * geometry.of(HERE, partner);
            double expected = truth[HERE] * truth[partner] * (partner == THERE ? 1 : 1.2);
            assertThat(product / expected).isCloseTo(1, within(0.08));
        }
    }
}
