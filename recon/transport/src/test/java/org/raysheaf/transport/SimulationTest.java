package org.raysheaf.transport;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.time.Instant;
import java.util.List;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.ListKind;
import org.raysheaf.geometry.event.Pairing;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.KleinNishina;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.settings.InvalidSettingsException;
import org.raysheaf.geometry.solid.Cylinder;
import org.raysheaf.geometry.solid.Sphere;

class SimulationTest {
    private static final PhantomPart BODY =
            PhantomPart.of("body", new Cylinder(10, 20)).holding(1);
    private static final DetectorSystem RINGS = Trials.rings(12);

    private record Run(Simulated outcome, Collected events) {}

    private static Run run(Acquisition acquisition, Phantom phantom, DetectorSystem system, int threads)
            throws IOException {
        ForkJoinPool pool = new ForkJoinPool(threads);
        try {
            Collected events = new Collected();
            Simulation simulation = new Simulation(acquisition, phantom, system, "the system");
            return new Run(simulation.run(events, pool, Progress.SILENT), events);
        } finally {
            pool.shutdown();
        }
    }

    private static Acquisition acquisition(double durationS, @Nullable String nuclide, @Nullable Long maxEvents) {
        return new Acquisition(
                "",
                "",
                nuclide,
                durationS,
                Instant.EPOCH,
                3,
                maxEvents,
                ListKind.PAIRS,
                true,
                true,
                true,
                Physics.STRAIGHT,
                Pairing.within(4));
    }

    @Test
    void resultDoesNotDependOnThreadCount() throws IOException {
        Acquisition acquisition = acquisition(60, null, null);
        Run one = run(acquisition, Trials.phantom(BODY), RINGS, 1);
        assertThat(one.outcome().events())
                .isGreaterThan(10_000)
                .isEqualTo(one.events().size());
        for (int threads = 2; threads <= 3; threads++) {
            Run more = run(acquisition, Trials.phantom(BODY), RINGS, threads);
            assertThat(more.outcome()).isEqualTo(one.outcome());
            assertThat(more.events()).isEqualTo(one.events());
        }
    }

    @Test
    void anotherSeedGivesAnotherList() throws IOException {
        Phantom phantom = Trials.phantom(BODY);
        Collected first = run(Trials.lasting(1, null, 1), phantom, RINGS, 1).events();
        Collected second = run(Trials.lasting(1, null, 2), phantom, RINGS, 1).events();
        assertThat(first).isNotEqualTo(second);
    }

    @Test
    void eventsComeInOrderFromPairsThatTheRuleAdmits() throws IOException {
        // near the crystals, where many lines join blocks fewer than three positions apart
        PhantomPart aside =
                PhantomPart.of("aside", new Sphere(2)).at(new Vector3(36, 0, 0)).holding(100);
        Collected events = run(acquisition(30, null, null), Trials.phantom(aside), RINGS, 2)
                .events();
        assertThat(events.size()).isGreaterThan(1000);
        for (int i = 0; i < events.size(); i++) {
            assertThat(RINGS.admits(events.elementA(i), events.elementB(i))).isTrue();
            assertThat(events.timePs(i)).isGreaterThanOrEqualTo(i == 0 ? 0 : events.timePs(i - 1));
        }
        assertThat(events.timePs(events.size() - 1)).isLessThan(30_000_000_000_000L);
    }

    @Test
    void positronsFollowActivityBranchingAndDecay() throws IOException {
        double frame = 1200;
        PhantomPart weak = BODY.holding(0.05);
        Run run = run(acquisition(frame, "F-18", null), Trials.phantom(weak), RINGS, 2);
        // 0.05 Bq/mm³; reference-values G7: a 20-minute mean of F-18 is the initial rate over 1.0644741725
        double expected = 0.05 * Math.PI * 100 * 20 * frame * 0.9673 / 1.0644741725;
        assertThat((double) run.outcome().positrons()).isCloseTo(expected, within(3 * Math.sqrt(expected)));
        assertThat(run.outcome().header().durationS()).isEqualTo(frame);
        assertThat(run.outcome().header().liveTimeS()).isEqualTo(frame);
        assertThat(run.outcome().header().systemDescription()).isEqualTo("the system");
    }

    @Test
    void truthTellsRandomsFromTrues() throws IOException {
        // ideal crystals and nothing in between: no scatter; 4 ns windows at 2 MBq and half a million singles a second
        Run run = run(acquisition(0.2, null, null), Trials.phantom(BODY.holding(300)), RINGS, 2);
        double same = 0;
        for (int i = 0; i < run.events().size(); i++) {
            assertThat(run.events().value(i, Attribute.OBJECT_SCATTERS)).isZero();
            assertThat(run.events().value(i, Attribute.DETECTOR_SCATTERS)).isZero();
            assertThat(run.events().value(i, Attribute.OUTSIDE_VIEW)).isZero();
            same += run.events().value(i, Attribute.SAME_DECAY);
        }
        assertThat(same / run.events().size()).isBetween(0.97, 0.9999);
    }

    @Test
    void replacedActivityIsNotEmitted() throws IOException {
        PhantomPart insert = PhantomPart.of("cold", new Sphere(8));
        Run run = run(acquisition(60, null, null), Trials.phantom(BODY, insert), RINGS, 2);
        double expected = 60 * Math.PI * (100 * 20 - 4.0 / 3 * 512);
        assertThat((double) run.outcome().positrons()).isCloseTo(expected, within(3 * Math.sqrt(expected)));
    }

    /** Two black slabs seen from between: every pair but those that slip out between the slabs at the sides. */
    @Test
    void everyPairThatMeetsTwoBlackSlabsIsRecorded() throws IOException {
        PhantomPart point = PhantomPart.of("point", new Sphere(0.001)).holding(1e12);
        Run run = run(acquisition(60, null, null), Trials.phantom(point), Trials.slabs(1000, 20, 0), 2);
        // a cube's face from its centre is 1/6 of all directions, so its two opposite faces see 1/3 of all pairs
        double pairs = run.outcome().positrons();
        assertThat(run.outcome().events() / pairs).isCloseTo(1.0 / 3, within(3 * Math.sqrt(2.0 / 9 / pairs)));
    }

    @Test
    void positiveTimeDifferenceMeansNearerToA() throws IOException {
        // 100 mm above the middle, toward the upper slab (element 0)
        PhantomPart point = PhantomPart.of("point", new Sphere(0.001))
                .at(new Vector3(0, 100, 0))
                .holding(1e12);
        Collected events = run(acquisition(10, null, null), Trials.phantom(point), Trials.slabs(400, 20, 0), 1)
                .events();
        assertThat(events.size()).isGreaterThan(1000);
        for (int i = 0; i < events.size(); i++) {
            double sign = events.elementA(i) == 0 ? 1 : -1;
            // straight up: 300 mm − 100 mm; at a slant longer by 1/cos
            assertThat(sign * events.timeDifferencePs(i)).isGreaterThan(199.9 / 0.299792458);
        }
    }

    @Test
    void energiesAreThoseOfAnnihilation() throws IOException {
        Run run = run(acquisition(1, null, null), Trials.phantom(BODY), RINGS, 1);
        assertThat(run.events().column(Attribute.ENERGY_A)).isNotEmpty().containsOnly((float)
                KleinNishina.ELECTRON_KEV);
    }

    @Test
    void stoppingEarlyKeepsTheBeginningAndShortensTheHeader() throws IOException {
        Run full = run(acquisition(60, null, null), Trials.phantom(BODY), RINGS, 2);
        long limit = full.outcome().events() / 2;
        for (int threads = 1; threads <= 2; threads++) {
            Run part = run(acquisition(60, null, limit), Trials.phantom(BODY), RINGS, threads);
            assertThat(part.outcome().events()).isEqualTo(limit);
            assertThat(part.events()).isEqualTo(full.events().first((int) limit));
            double stopped = part.events().timePs((int) limit - 1) / 1e12;
            assertThat(part.outcome().header().durationS()).isEqualTo(stopped);
        }
    }

    @Test
    void listsHaveTheColumnsThatBlocksMeasure() {
        Acquisition plain = new Acquisition(
                "",
                "",
                null,
                1,
                Instant.EPOCH,
                1,
                null,
                ListKind.PAIRS,
                false,
                false,
                false,
                Physics.FULL,
                Pairing.within(4));
        assertThat(new Simulation(plain, Trials.phantom(BODY), RINGS, "").attributes())
                .containsExactlyInAnyOrder(Attribute.ELEMENT_A, Attribute.ELEMENT_B, Attribute.TIME);
    }

    /** Everything switched on, with scatter, randoms, gammas and the crystals' own radioactivity. */
    @Test
    void fullPhysicsDoesNotDependOnThreadCountEither() throws IOException {
        Readout readout = new Readout(
                Readout.Channel.BLOCK,
                Readout.Decoding.CENTROID,
                1,
                3.0,
                0.14,
                0.5,
                1,
                500,
                10,
                100,
                400,
                Readout.DeadTime.PARALYSABLE,
                50,
                900.0,
                true);
        DetectorSystem system = new DetectorSystem(new SystemDescription(
                "rings",
                new FieldOfView(29, 60),
                new PairRule(3),
                List.of(),
                List.of(new CrystalBlock(
                        "block", 11, 11, 1, new Vector3(1.85, 1.85, 13), new Vector3(1.7, 1.7, 13), "lyso", readout)),
                List.of(new Placement.Rings("block", 12, 42, 0, List.of(-20.8, 0.0, 20.8)))));
        Phantom phantom = new Phantom(new PhantomDescription("body", List.of(BODY.holding(200))));
        Acquisition acquisition = new Acquisition(
                "",
                "",
                "I-124",
                0.4,
                Instant.EPOCH,
                5,
                null,
                ListKind.PAIRS,
                true,
                true,
                true,
                Physics.FULL,
                new Pairing(5, 200, 800.0, 50.0, Pairing.Crowds.EVERY_PAIR, 0));
        Run one = run(acquisition, phantom, system, 1);
        assertThat(one.outcome().events()).isGreaterThan(3000);
        assertThat(one.outcome().liveFraction()).isBetween(0.7, 0.999);
        for (int threads = 2; threads <= 3; threads++) {
            Run more = run(acquisition, phantom, system, threads);
            assertThat(more.outcome()).isEqualTo(one.outcome());
            assertThat(more.events()).isEqualTo(one.events());
        }
        double delayed = 0;
        double scattered = 0;
        for (int i = 0; i < one.events().size(); i++) {
            delayed += one.events().value(i, Attribute.DELAYED);
            scattered += one.events().value(i, Attribute.OBJECT_SCATTERS) > 0 ? 1 : 0;
            assertThat(one.events().value(i, Attribute.DEPTH_A)).isBetween(0.0, 13.0);
        }
        assertThat(delayed).isPositive();
        assertThat(scattered).isPositive();
    }

    @Test
    void aFailingSinkEndsTheRunWithItsOwnError() {
        Simulation simulation = new Simulation(acquisition(60, null, null), Trials.phantom(BODY), RINGS, "");
        IOException full = new IOException("disk full");
        assertThatThrownBy(() -> simulation.run(
                        block -> {
                            throw full;
                        },
                        ForkJoinPool.commonPool(),
                        Progress.SILENT))
                .isSameAs(full);
    }

    @Test
    void refusesSettingsThatGiveNoAcquisition() {
        assertThatThrownBy(() -> acquisition(-1, "F-19", 0L))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("duration_s: expected a number > 0, found -1")
                .hasMessageContaining("max_events: expected a number >= 1, found 0")
                .hasMessageContaining("nuclide: expected one of C-11, N-13")
                .hasMessageContaining("found F-19");
        Phantom cold = Trials.phantom(BODY.holding(0));
        assertThatThrownBy(() -> new Simulation(acquisition(1, null, null), cold, RINGS, ""))
                .isInstanceOf(InvalidSettingsException.class)
                .hasMessageContaining("nothing would decay");
    }
}
