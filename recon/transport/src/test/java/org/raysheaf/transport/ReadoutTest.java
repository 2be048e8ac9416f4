package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.time.Instant;
import java.util.Arrays;
import java.util.List;
import java.util.Objects;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import org.apache.commons.math3.fitting.GaussianCurveFitter;
import org.apache.commons.math3.fitting.WeightedObservedPoints;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.MonolithicBlock;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSink;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.event.PairingTally;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.Source;
import org.raysheaf.geometry.port.Progress;

class ReadoutTest {
    private static final double FWHM_PER_SD = 2.354820045; // reference-values A
    private static final Phantom CENTRE = Trials.sources(new Source.Point("centre", Vector3.ZERO, 300));

    private static Readout readout(
            double energyResolution,
            double lightFwhmMm,
            double timeFwhmPs,
            double integrationNs,
            double deadNs,
            Readout.DeadTime deadTime) {
        return new Readout(
                Readout.Channel.BLOCK,
                lightFwhmMm > 0 ? Readout.Decoding.CENTROID : Readout.Decoding.LARGEST,
                lightFwhmMm,
                null,
                energyResolution,
                0.5,
                0,
                timeFwhmPs,
                1,
                integrationNs,
                deadNs,
                deadTime,
                0,
                null,
                false);
    }

    private static Simulated run(Acquisition acquisition, Phantom phantom, DetectorSystem system, EventSink sink)
            throws IOException {
        ForkJoinPool pool = new ForkJoinPool(2);
        try {
            return new Simulation(acquisition, phantom, system, "").run(sink, pool, Progress.SILENT);
        } finally {
            pool.shutdown();
        }
    }

    /** One crystal of LSO, and far away a tiny one, so that nothing scatters from one into the other. */
    private static DetectorSystem lone(Vector3 sizeMm, Readout readout) {
        Vector3 tiny = new Vector3(1, 1, 1);
        return new DetectorSystem(new SystemDescription(
                "lone",
                new FieldOfView(50, 10),
                new PairRule(1),
                List.of(),
                List.of(
                        new CrystalBlock("large", 1, 1, 1, sizeMm, sizeMm, "lso", readout),
                        new CrystalBlock("tiny", 1, 1, 1, tiny, tiny, "lso", readout)),
                List.of(
                        new Placement.Single("large", new Vector3(0, 150, 0), new Vector3(0, -1, 0), Vector3.Z),
                        new Placement.Single("tiny", new Vector3(0, -1000, 0), Vector3.Y, Vector3.Z))));
    }

    private static int[] spectrum(DetectorSystem system, double durationS) throws IOException {
        int[] counts = new int[800];
        run(Trials.singles(durationS, Physics.STRAIGHT, 41), CENTRE, system, block -> {
            for (int i = 0; i < block.size(); i++) {
                counts[(int) block.floats(Attribute.ENERGY)[i]]++;
            }
        });
        return counts;
    }

    @Test
    void theFullEnergyPeakHasItsPlaceAndWidth() throws IOException {
        Readout blurred = readout(0.12, 0, 0, 0, 0, Readout.DeadTime.NON_PARALYSABLE);
        int[] counts = spectrum(lone(new Vector3(300, 300, 60), blurred), 5);
        double sd = 0.12 * 510.99895 / FWHM_PER_SD;
        WeightedObservedPoints points = new WeightedObservedPoints();
        for (int keV = 480; keV < 590; keV++) {
            points.add(1.0 / Math.max(1, counts[keV]), keV + 0.5, counts[keV]);
        }
        double[] fit = GaussianCurveFitter.create().fit(points.toList()); // height, mean, sd
        // the tail of scattered photons under the peak pulls the fit by some tenths of a keV
        assertThat(fit[1]).isCloseTo(510.99895, within(1.0));
        assertThat(fit[2]).isCloseTo(sd, within(0.04 * sd));
        int above = 0;
        int all = 0;
        for (int keV = 0; keV < counts.length; keV++) {
            all += counts[keV];
            above += keV >= 511 + 4 * sd ? counts[keV] : 0;
        }
        // beyond 4 sd lie 3.2e-5 of a Gaussian
        assertThat(above).isLessThan((int) (1e-4 * all));
    }

    @Test
    void comptonEdgeIsWhereItShouldBe() throws IOException {
        // reference-values B: 340.666 keV; in a thin crystal hardly anything scatters twice
        int[] counts = spectrum(lone(new Vector3(300, 300, 2), Readout.IDEAL), 5);
        int below = 0;
        int above = 0;
        for (int i = 1; i <= 15; i++) {
            below += counts[340 - i];
            above += counts[340 + i];
        }
        assertThat(below).isGreaterThan(500);
        // at the edge of the plane a slant path is long, so that some photons scatter twice
        assertThat((double) above / below).isLessThan(0.12);
        for (int keV = 512; keV < counts.length; keV++) {
            assertThat(counts[keV]).isZero();
        }
    }

    /** reference-values G6 (Knoll): non-paralysable n/(1 + nτ), paralysable n e^(−nτ), τ = 1 µs. */
    @ParameterizedTest
    @CsvSource({
        "1e5, NON_PARALYSABLE, 90909.091", "1e5, PARALYSABLE, 90483.742",
        "5e5, NON_PARALYSABLE, 333333.333", "5e5, PARALYSABLE, 303265.330"
    })
    void deadTimeFollowsItsLaw(double rate, Readout.DeadTime kind, double expected) throws IOException {
        // each of the two black slabs, seen from the middle of a cube, gets one photon of a third of all decays
        Readout slow = readout(0, 0, 0, 0, 1000, kind);
        DetectorSystem system = new DetectorSystem(blackSlabs(slow));
        double seconds = 2e5 / rate;
        Phantom source = Trials.sources(new Source.Point("centre", Vector3.ZERO, 3 * rate / 1000));
        long[] counts = new long[2];
        Simulated outcome = run(Trials.singles(seconds, Physics.STRAIGHT, 42), source, system, block -> {
            for (int i = 0; i < block.size(); i++) {
                counts[block.ints(Attribute.ELEMENT)[i]]++;
            }
        });
        for (long count : counts) {
            // dead time makes counts more even than Poisson's, so that is an upper bound of the error
            assertThat(count / seconds).isCloseTo(expected, within(3.5 * Math.sqrt(expected / seconds)));
        }
        // the clock of the readout knows how long it could begin: exactly the measured share for the first kind
        double live = expected / rate;
        assertThat(outcome.liveFraction()).isCloseTo(live, within(0.01 * live));
    }

    private static SystemDescription blackSlabs(Readout readout) {
        SystemDescription bare = Trials.slabs(1000, 20, 0).description();
        Vector3 size = new Vector3(1000, 1000, 20);
        return new SystemDescription(
                "slabs",
                bare.fieldOfView(),
                bare.pairs(),
                bare.materials(),
                List.of(new CrystalBlock("slab", 1, 1, 1, size, size, "crystal", readout)),
                bare.placements());
    }

    /** reference-values G6: R = 2 τ S₁ S₂ with the one-sided window τ, from prompt and from delayed pairs. */
    @Test
    void randomCoincidencesOfSinglePhotonsFollowTheirRates() throws IOException {
        DetectorSystem system = Trials.slabs(1000, 20, 0);
        double rate = 1e5;
        double tauNs = 10;
        double seconds = 20;
        // single photons only: one of 140 keV in 89 % of decays of Tc-99m, a sixth of directions for each slab
        Phantom source = Trials.sources(new Source.Point("centre", Vector3.ZERO, rate * 6 / 0.89 / 1000));
        Physics straight = new Physics(false, 0, true, false, "vacuum");
        Acquisition acquisition = new Acquisition(
                "",
                "",
                "Tc-99m",
                seconds,
                Instant.EPOCH,
                43,
                null,
                ListKind.PAIRS,
                false,
                false,
                false,
                straight,
                new Pairing(tauNs, 0, null, 500.0, Pairing.Crowds.DISCARD, 0));
        PairingTally tally = Objects.requireNonNull(
                run(acquisition, source, system, block -> {}).pairing());
        double singles = tally.singles() / 2.0 / seconds;
        assertThat(singles).isCloseTo(rate, within(4 * Math.sqrt(rate / seconds)));
        double expected = 2 * tauNs * 1e-9 * singles * singles * seconds;
        // a third single in the window spoils a pair: 2 τ S of them, 0.2 %, well inside the statistics
        assertThat((double) tally.delayed()).isCloseTo(expected, within(4 * Math.sqrt(expected)));
        assertThat((double) tally.prompts()).isCloseTo(expected, within(4 * Math.sqrt(expected)));
    }

    @Test
    void pileUpAddsEnergies() throws IOException {
        // 3e5 per second into each slab, 200 ns of integration: 6 % of signals are two photons
        DetectorSystem system =
                new DetectorSystem(blackSlabs(readout(0, 0, 0, 200, 200, Readout.DeadTime.NON_PARALYSABLE)));
        Phantom source = Trials.sources(new Source.Point("centre", Vector3.ZERO, 900));
        long[] counts = new long[10];
        run(Trials.singles(0.5, Physics.STRAIGHT, 44), source, system, block -> {
            for (int i = 0; i < block.size(); i++) {
                counts[(int) Math.rint(block.floats(Attribute.ENERGY)[i] / 510.99895)]++;
            }
        });
        double signals = Arrays.stream(counts).sum();
        double mean = 3e5 * 200e-9;
        double two = mean * Math.exp(-mean);
        assertThat(counts[0]).isZero();
        assertThat(counts[2] / signals).isCloseTo(two, within(4 * Math.sqrt(two / signals)));
    }

    @Test
    void timesAreBlurredAndStayInOrder() throws IOException {
        DetectorSystem system =
                new DetectorSystem(blackSlabs(readout(0, 0, 400, 0, 0, Readout.DeadTime.NON_PARALYSABLE)));
        Phantom source = Trials.sources(new Source.Point("centre", Vector3.ZERO, 100));
        Collected pairs = new Collected();
        run(Trials.lasting(0.5, null, 45), source, system, pairs);
        double squares = 0;
        for (int i = 0; i < pairs.size(); i++) {
            assertThat(pairs.timePs(i)).isGreaterThanOrEqualTo(i == 0 ? 0 : pairs.timePs(i - 1));
            squares += pairs.timeDifferencePs(i) * pairs.timeDifferencePs(i);
        }
        // two singles of 400 ps FWHM each, from the middle: √2 · 400 ps
        double sd = Math.sqrt(2) * 400 / FWHM_PER_SD;
        assertThat(Math.sqrt(squares / pairs.size())).isCloseTo(sd, within(3.5 * sd / Math.sqrt(2.0 * pairs.size())));
    }

    /** Sends one deposit again and again through a readout. */
    private static Collected read(DetectorSystem system, int element, Vector3 place, int times) throws IOException {
        ReadoutPlan plan = new ReadoutPlan(system);
        Pulses pulses = new Pulses(times);
        PulseMaker maker = new PulseMaker(plan, pulses, RandomStreams.stream(46, 0));
        Deposits deposits = new Deposits();
        for (int i = 0; i < times; i++) {
            deposits.clear();
            Photon photon = Trials.photon(place.x(), place.y(), place.z(), Vector3.X);
            deposits.add(element, photon, 511);
            maker.make(deposits, 1_000_000L * i, i, new double[3], false);
        }
        pulses.sort();
        Set<Attribute> attributes = ListKind.SINGLES.measured();
        Collected singles = new Collected();
        Channels channels = new Channels(plan, attributes, singles);
        channels.take(pulses, Long.MAX_VALUE);
        channels.finish();
        return singles;
    }

    @Test
    void lightSharingMovesEventsToNeighbours() throws IOException {
        double pitch = 2;
        CrystalBlock block = new CrystalBlock(
                "block",
                5,
                5,
                1,
                new Vector3(pitch, pitch, 10),
                new Vector3(pitch, pitch, 10),
                "lso",
                readout(0, 2.0, 0, 0, 0, Readout.DeadTime.NON_PARALYSABLE));
        DetectorSystem system = new DetectorSystem(new SystemDescription(
                "one",
                new FieldOfView(20, 10),
                new PairRule(1),
                List.of(),
                List.of(block),
                List.of(new Placement.Rings("block", 2, 30, 0, List.of(0.0)))));
        int middle = block.crystal(2, 2, 0);
        int draws = 40_000;
        Collected singles = read(system, middle, system.centre(middle), draws);
        int stayed = 0;
        for (double element : singles.column(Attribute.ELEMENT)) {
            stayed += element == middle ? 1 : 0;
        }
        double side =
                2 * 0.5 * org.apache.commons.math3.special.Erf.erf(0.5 * pitch / (2.0 / FWHM_PER_SD) / Math.sqrt(2));
        double expected = side * side;
        assertThat((double) stayed / draws)
                .isCloseTo(expected, within(3.5 * Math.sqrt(expected * (1 - expected) / draws)));
    }

    @Test
    void blocksOfOnePieceMeasurePointsWithTheirErrors() throws IOException {
        Vector3 sd = new Vector3(0.6, 0.8, 1.5);
        MonolithicBlock block =
                new MonolithicBlock("slab", new Vector3(40, 40, 12), new Vector3(2, 2, 3), "lyso", sd, Readout.IDEAL);
        DetectorSystem system = new DetectorSystem(new SystemDescription(
                "two",
                new FieldOfView(20, 10),
                new PairRule(1),
                List.of(),
                List.of(block),
                List.of(new Placement.Rings("slab", 2, 30, 90, List.of(0.0)))));
        assertThat(system.elements()).isEqualTo(2 * 20 * 20 * 4);
        Vector3 place = system.blocks().get(0).pose().apply(new Vector3(1, -2, 6));
        int draws = 40_000;
        Collected singles = read(system, system.elementAt(place), place, draws);
        double[] u = new double[draws];
        double[] v = new double[draws];
        double[] w = new double[draws];
        for (int i = 0; i < draws; i++) {
            Vector3 point = new Vector3(
                    singles.value(i, Attribute.POSITION_X),
                    singles.value(i, Attribute.POSITION_Y),
                    singles.value(i, Attribute.POSITION_Z));
            Vector3 local = system.blocks().get(0).pose().inverse().apply(point);
            u[i] = local.x();
            v[i] = local.y();
            w[i] = local.z();
            assertThat((int) singles.value(i, Attribute.ELEMENT)).isEqualTo(system.elementAt(point));
        }
        check(u, 1, 0.6);
        check(v, -2, 0.8);
        check(w, 6, 1.5); // 4 sd from either face: cutting off is not seen
        assertThat(singles.value(0, Attribute.POSITION_U_SD)).isCloseTo(0.6, within(1e-6));
        assertThat(singles.value(0, Attribute.POSITION_W_SD)).isCloseTo(1.5, within(1e-6));
    }

    private static void check(double[] values, double mean, double sd) {
        double sum = 0;
        double squares = 0;
        for (double value : values) {
            sum += value - mean;
            squares += (value - mean) * (value - mean);
        }
        int n = values.length;
        assertThat(sum / n).isCloseTo(0, within(3.5 * sd / Math.sqrt(n)));
        assertThat(Math.sqrt(squares / n)).isCloseTo(sd, within(3.5 * sd / Math.sqrt(2.0 * n)));
    }

    /** reference-values G4: a black ring of radius 80 mm and length 130 mm, seen from its axis, in air. */
    @ParameterizedTest
    @CsvSource({"0, 0.630593, 0.630593", "30, 0.582865, 0.400819"})
    void aBlackRingSeesItsSolidAngle(double z, double single, double coincidence) throws IOException {
        int count = 180;
        double width = 2 * 80 * Math.tan(Math.PI / count) - 1e-4;
        Vector3 size = new Vector3(width, 130, 5);
        DetectorSystem ring = new DetectorSystem(new SystemDescription(
                "ring",
                new FieldOfView(60, 100),
                new PairRule(1),
                List.of(new org.raysheaf.geometry.matter.Material("black", 0)),
                List.of(new CrystalBlock("stave", 1, 1, 1, size, size, "black")),
                List.of(new Placement.Rings("stave", count, 80, 0, List.of(0.0)))));
        Phantom source = Trials.sources(new Source.Point("point", new Vector3(0, 0, z), 100));
        Simulated singles =
                run(Trials.singles(2, new Physics(false, 0, false, false, "air"), 47), source, ring, new Counting());
        Simulated pairs = run(Trials.lasting(2, null, 47), source, ring, new Counting());
        double photons = 2.0 * singles.decays();
        // the ring is a polygon of 180 sides with slits of 1e-4 mm: 1e-4 of the solid angle; air adds and takes less
        // than 1e-3
        assertThat(singles.events() / photons)
                .isCloseTo(single, within(4 * Math.sqrt(single * (1 - single) / photons) + 3e-4));
        double p = coincidence;
        assertThat((double) pairs.events() / pairs.decays())
                .isCloseTo(p, within(4 * Math.sqrt(p * (1 - p) / pairs.decays()) + 6e-4));
    }

    private static final class Counting implements EventSink {
        @Override
        public void accept(EventBlock block) {
            // the simulation counts
        }
    }
}
